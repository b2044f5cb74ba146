import type { RouteLocationRaw } from 'vue-router'
import type { CellKind } from '../../../server/shared/wareBoard.js'

/** One choice of a list. */
export interface Option {
  value: string
  label: string
  /** Small words after it. */
  note?: string | undefined
  group?: string | undefined
  disabled?: boolean | undefined
  /** Draws the outcome before its word. */
  mark?: CellKind | undefined
}

/** A column of a DataTable. Without a slot `cell-<key>` the cell is `text`, else the row's own key. */
export interface Column<Row> {
  key: string
  label: string
  align?: 'start' | 'end'
  sortable?: boolean
  text?: (row: Row) => string | number | null | undefined
  /** On the phone: heading of the card, or left out. */
  phone?: 'title' | 'hide'
  /** Stays on one line: dates, names of kilns. */
  nowrap?: boolean
  /** CSS width, for columns that must not move. */
  width?: string
}

/** A word of a menu: a link or something to do. */
export interface MenuItem {
  label: string
  to?: RouteLocationRaw
  run?: () => unknown
  /** Text at the right: the present choice, a key. */
  note?: string
  checked?: boolean
  danger?: boolean
  disabled?: boolean
}
