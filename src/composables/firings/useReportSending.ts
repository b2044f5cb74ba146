import { ref, shallowRef } from 'vue'
import { v7 as makeUid } from 'uuid'
import { ApiError } from '../../api/http'
import { getFiring, sendRevision } from '../../api/firings'
import type { FiringDetail } from '../../../server/contract/firings.js'
import type { ReportDraft } from './reportDraft'
import { reportBodyOf } from './reportDraft'

interface Options {
  network: () => string
  firing: () => string
  draft: () => ReportDraft | null
  /** Keeps uids and time with the draft before it leaves. */
  keep: (changes: Pick<ReportDraft, 'lossUids' | 'deviceTime'>) => void
  arrived: (firing: FiringDetail) => unknown
}

/**
 * Sends a report exactly once: uids and time are kept with the draft first, so that a second try has
 * the same body under the same uid. Whatever goes wrong, the draft stays.
 */
export function useReportSending({ network, firing, draft, keep, arrived }: Options) {
  const busy = ref(false)
  /** Why it was not sent. */
  const problem = shallowRef<ApiError | null>(null)
  /** Somebody else wrote on this firing meanwhile: how it is now. */
  const meanwhile = shallowRef<FiringDetail | null>(null)

  async function send(): Promise<void> {
    const now = draft()
    if (busy.value || !now) return
    busy.value = true
    problem.value = null
    try {
      await arrived(await sendRevision(network(), firing(), now.revision, bodyOf(now)))
    } catch (error) {
      if (!(error instanceof ApiError)) throw error
      // The server holds a revision that this one does not know: someone else's, or an earlier try of ours.
      if (error.code === 'stale' || error.code === 'different-body') await look(error)
      else problem.value = error
    } finally {
      busy.value = false
    }
  }

  function bodyOf(now: ReportDraft) {
    const { report, lossUids } = reportBodyOf(now, makeUid)
    const deviceTime = now.deviceTime ?? new Date().toISOString()
    keep({ lossUids, deviceTime })
    const base = { base: now.base, deviceTime, report }
    return now.kind === 'amend'
      ? { kind: 'amend' as const, reason: now.reason, ...base }
      : { kind: 'report' as const, ...base }
  }

  async function look(refusal: ApiError): Promise<void> {
    try {
      meanwhile.value = await getFiring(network(), firing())
    } catch (error) {
      if (!(error instanceof ApiError)) throw error
      problem.value = refusal
    }
  }

  return { busy, problem, meanwhile, send }
}
