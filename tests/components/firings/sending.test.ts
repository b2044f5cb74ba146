import { afterEach, describe, expect, it, vi } from 'vitest'
import { draftOf, markOf, touch } from '../../../src/composables/firings/reportDraft'
import type { ReportDraft } from '../../../src/composables/firings/reportDraft'
import { useReportSending } from '../../../src/composables/firings/useReportSending'
import { makeFiring, makeLot, uidOf } from '../../support/firingViews'

const firing = makeFiring({ status: 'packed', lots: [makeLot({ uid: uidOf(1), pieces: 5 })] })

function sender() {
  const start = draftOf(firing, uidOf(50))
  let draft: ReportDraft = {
    ...start,
    lots: start.lots.map((lot) => touch(lot, 1, markOf('s-crack', 'waster'))),
  }
  const arrived = vi.fn()
  const sending = useReportSending({
    network: () => 'quay',
    firing: () => firing.uid,
    draft: () => draft,
    keep: (changes) => (draft = { ...draft, ...changes }),
    arrived,
  })
  return { ...sending, arrived }
}

/** What the server would answer, one after the other. */
function answers(...list: (Response | Error)[]) {
  const fetch = vi.fn(async (_path: string, _init: RequestInit) => {
    const next = list.shift()
    if (next instanceof Error) throw next
    return next ?? Response.error()
  })
  vi.stubGlobal('fetch', fetch)
  return fetch
}
const json = (status: number, body: unknown) =>
  new Response(JSON.stringify(body), { status, headers: { 'content-type': 'application/json' } })
const refusal = (status: number, code: string) =>
  json(status, { error: { code, message: 'no', requestId: 'r' } })

afterEach(() => vi.unstubAllGlobals())

describe('sending a report', () => {
  it('sends the same body under the same uid when it is tried again', async () => {
    const fetch = answers(new TypeError('gone'), json(200, { ...firing, status: 'reported' }))
    const { send, problem, arrived } = sender()
    await send()
    expect(problem.value?.code).toBe('offline')
    expect(arrived).not.toHaveBeenCalled()
    await send()
    expect(fetch.mock.calls[1]).toEqual(fetch.mock.calls[0])
    expect(fetch.mock.calls[0]?.[0]).toContain(`/revisions/${uidOf(50)}`)
    expect(problem.value).toBeNull()
    expect(arrived).toHaveBeenCalledTimes(1)
  })

  it('sends a double tap once', async () => {
    const fetch = answers(json(200, { ...firing, status: 'reported' }))
    const { send } = sender()
    await Promise.all([send(), send()])
    expect(fetch).toHaveBeenCalledTimes(1)
  })

  it('looks at what changed when the firing is no longer the one it was written on', async () => {
    answers(refusal(409, 'stale'), json(200, { ...firing, revision: 2, status: 'reported' }))
    const { send, meanwhile, arrived } = sender()
    await send()
    expect(meanwhile.value?.revision).toBe(2)
    expect(arrived).not.toHaveBeenCalled()
  })

  it('says the server’s refusal in its own words', async () => {
    answers(refusal(403, 'forbidden'))
    const { send, problem } = sender()
    await send()
    expect(problem.value).toMatchObject({ code: 'forbidden', message: 'no' })
  })
})
