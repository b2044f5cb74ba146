import { computed, reactive, ref } from 'vue'
import type { FailedOutcome } from '../../../server/shared/counts.js'
import { FAILED_OUTCOMES } from '../../../server/shared/counts.js'
import { faultRule } from '../../../server/shared/faults/rules.js'
import type { LotDraft, Mark, ReportDraft } from './reportDraft'
import { count, markOf, sameMark, setCount, setMark, touch } from './reportDraft'

interface Options {
  draft: () => ReportDraft | null
  changeLot: (uid: string, with_: (lot: LotDraft) => LotDraft) => void
}

/** A piece (or, `at` null, a count of like pieces) whose details are open. */
interface Sheet {
  lot: string
  at: number | null
  mark: Mark | null
  /** Nothing was in hand: the fault is asked first. */
  first: boolean
}

const HAND: { fault: string | null; outcome: FailedOutcome; neighbour: boolean } = {
  fault: null,
  outcome: 'waster',
  neighbour: false,
}

const usualOutcome = (fault: string): FailedOutcome => {
  const usual = faultRule(fault)?.usualOutcome
  return FAILED_OUTCOMES.find((outcome) => outcome === usual) ?? 'waster'
}

/** What is in hand (fault, outcome, neighbour), what a touch does with it, and the piece touched last. */
export function useReportHand({ draft, changeLot }: Options) {
  const hand = reactive({ ...HAND })
  const mark = computed(() =>
    hand.fault === null ? null : markOf(hand.fault, hand.outcome, hand.neighbour),
  )
  const touched = ref<{ lot: string; at: number } | null>(null)
  const sheet = ref<Sheet | null>(null)

  const lotOf = (uid: string): LotDraft | undefined => draft()?.lots.find((lot) => lot.lot === uid)
  const markAt = (lot: string, at: number): Mark | null =>
    lotOf(lot)?.entries.find((entry) => entry.at === at)?.mark ?? null
  const lastMark = computed(() =>
    touched.value ? markAt(touched.value.lot, touched.value.at) : null,
  )

  /** Another fault brings its usual outcome with it. */
  function take(fault: string | null): void {
    hand.fault = fault
    hand.neighbour = false
    if (fault !== null) hand.outcome = usualOutcome(fault)
  }

  function touchPiece(lot: string, at: number): void {
    const inHand = mark.value
    touched.value = { lot, at }
    if (inHand) changeLot(lot, (now) => touch(now, at, inHand))
    else sheet.value = { lot, at, mark: markAt(lot, at), first: markAt(lot, at) === null }
  }

  /** One more of what is in hand, in a lot that is counted. */
  function addCount(lot: string): void {
    const inHand = mark.value
    touched.value = null
    if (inHand) changeLot(lot, (now) => count(now, inHand, 1))
    else sheet.value = { lot, at: null, mark: null, first: true }
  }

  /** So many pieces with this mark, in a lot that is counted. */
  function setPieces(lot: string, which: Mark, pieces: number): void {
    touched.value = null
    changeLot(lot, (now) => setCount(now, which, pieces))
  }

  function openLast(): void {
    if (touched.value) sheet.value = { ...touched.value, mark: lastMark.value, first: false }
  }

  function openCounted(lot: string, which: Mark): void {
    sheet.value = { lot, at: null, mark: which, first: false }
  }

  /** What the open sheet says now. */
  function setFromSheet(next: Mark | null): void {
    const open = sheet.value
    if (!open) return
    if (open.at === null) changeLot(open.lot, (lot) => recount(lot, open.mark, next))
    else changeLot(open.lot, (lot) => setMark(lot, open.at ?? 0, next))
    if (open.first && next)
      Object.assign(hand, { fault: next.fault, outcome: next.outcome, neighbour: false })
    sheet.value = { ...open, mark: next }
  }

  function recount(lot: LotDraft, before: Mark | null, next: Mark | null): LotDraft {
    if (before === null) return next ? count(lot, next, 1) : lot
    const pieces = lot.entries.find((entry) => sameMark(entry.mark, before))?.pieces ?? 0
    const without = setCount(lot, before, 0)
    return next ? count(without, next, pieces) : without
  }

  /** "A neighbour did it" of the piece touched last; the next ones with the same fault follow. */
  function turnNeighbour(): void {
    const [piece, now] = [touched.value, lastMark.value]
    if (!piece || !now) return
    const next = { ...now, neighbour: !now.neighbour }
    changeLot(piece.lot, (lot) => setMark(lot, piece.at, next))
    if (hand.fault === next.fault) hand.neighbour = next.neighbour
  }

  return {
    hand,
    mark,
    touched,
    lastMark,
    sheet,
    take,
    touchPiece,
    addCount,
    setPieces,
    openLast,
    openCounted,
    setFromSheet,
    turnNeighbour,
  }
}
