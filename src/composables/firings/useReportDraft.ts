import { computed, ref, shallowRef } from 'vue'
import { v7 as makeUid } from 'uuid'
import type { FiringDetail } from '../../../server/contract/firings.js'
import { dropDraft, keepDraft, readDraft } from './draftStorage'
import type { LotDraft, ReportDraft } from './reportDraft'
import { draftOf, rebase } from './reportDraft'

/** Steps back that are remembered. */
const MOST_STEPS = 100

/** The report of one firing while it is made: kept on this device at every change, each change undone one by one. */
export function useReportDraft() {
  const draft = shallowRef<ReportDraft | null>(null)
  const past = shallowRef<ReportDraft[]>([])
  const kept = ref(true)
  /** Changes are on this device that were not sent. */
  const begun = ref(false)
  let key = ''

  /** Takes up what was kept of this firing's report, or starts from what it is. */
  function begin(storageKey: string, firing: FiringDetail): { restored: boolean } {
    key = storageKey
    past.value = []
    const before = readDraft<ReportDraft>(key, 1)
    begun.value = before !== null
    draft.value = before?.draft ?? draftOf(firing, makeUid())
    return { restored: before !== null }
  }

  function put(next: ReportDraft): void {
    draft.value = next
    begun.value = true
    kept.value = keepDraft(key, next)
  }

  /** Changes something that a person sees: one step of undo. */
  function change(changes: Partial<ReportDraft>): void {
    if (!draft.value) return
    past.value = [...past.value.slice(1 - MOST_STEPS), draft.value]
    put({ ...draft.value, ...changes })
  }

  function changeLot(uid: string, with_: (lot: LotDraft) => LotDraft): void {
    if (draft.value)
      change({ lots: draft.value.lots.map((lot) => (lot.lot === uid ? with_(lot) : lot)) })
  }

  /** Back to before the last change; what belongs to sending stays. */
  function undo(): void {
    const before = past.value.at(-1)
    if (!before || !draft.value) return
    past.value = past.value.slice(0, -1)
    const { revision, deviceTime, base, kind, lossUids } = draft.value
    put({ ...before, revision, deviceTime, base, kind, lossUids })
  }

  /** Changes that are no step of undo: typed text, uids. */
  function note(changes: Partial<ReportDraft>): void {
    if (draft.value) put({ ...draft.value, ...changes })
  }

  /** Mine on top of what somebody else wrote meanwhile. */
  function putOnTop(firing: FiringDetail): void {
    past.value = []
    if (draft.value) put(rebase(draft.value, firing, makeUid()))
  }

  /** Gives up what is here for the firing as it is. */
  function startAgain(firing: FiringDetail): void {
    dropDraft(key)
    past.value = []
    begun.value = false
    draft.value = draftOf(firing, makeUid())
  }

  /** It arrived: nothing is left to keep. */
  function arrived(): void {
    dropDraft(key)
    begun.value = false
  }

  return {
    draft,
    kept,
    begun,
    begin,
    change,
    changeLot,
    note,
    undo,
    canUndo: computed(() => past.value.length > 0),
    putOnTop,
    startAgain,
    arrived,
  }
}
