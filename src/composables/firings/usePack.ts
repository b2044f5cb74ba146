import { computed, ref, shallowRef, watch } from 'vue'
import { useQuery, useQueryClient } from '@tanstack/vue-query'
import { useRouter } from 'vue-router'
import { v7 as makeUid } from 'uuid'
import { catalogueQuery } from '../../api/catalogue'
import { firingQuery, getFiring, lastFiringQuery, sendRevision } from '../../api/firings'
import { ApiError } from '../../api/http'
import type { FiringDetail, RevisionInput } from '../../../server/contract/firings.js'
import { useSessionStore } from '../../stores/session'
import { useForm } from '../useForm'
import { useToast } from '../useToast'
import { draftKey } from './draftStorage'
import type { PackDraft } from './packDraft'
import { emptyPack, packBodyOf, packProblems } from './packDraft'
import { draftOf, reportBodyOf } from './reportDraft'
import { usePackDraft } from './usePackDraft'
import { useRecentChoices } from './useRecentChoices'

interface Options {
  network: () => string
  /** uid of a firing whose load is corrected; null packs a new one. */
  edit: () => string | null
  /** Never packed here: on to the report at once. */
  quick: () => boolean
}

/** Packing a firing, or correcting its load, from opening the page to its arrival. */
export function usePack({ network, edit, quick }: Options) {
  const router = useRouter()
  const queries = useQueryClient()
  const session = useSessionStore()
  const toast = useToast()
  const user = session.user?.uid ?? ''
  const recent = useRecentChoices(user, network())
  const catalogue = useQuery(computed(() => catalogueQuery(network())))
  const editing = useQuery(
    computed(() => ({
      ...firingQuery(network(), edit() ?? ''),
      enabled: edit() !== null,
      staleTime: 0,
    })),
  )
  /** Why a reported load is corrected. */
  const reason = ref('')
  /** Somebody else changed the firing meanwhile. */
  const meanwhile = shallowRef<FiringDetail | null>(null)

  const form = useForm<PackDraft, FiringDetail>({ initial: emptyPack(makeUid), submit, done })
  const pack = usePackDraft({
    values: form.values,
    reset: form.reset,
    catalogue: () => catalogue.data.value,
    kiln: () => recent.lists.value.kiln?.[0],
    kind: () => recent.lists.value.kind?.[0],
  })
  const last = useQuery(
    computed(() => ({
      ...lastFiringQuery(network(), form.values.kiln ?? '', form.values.kind),
      enabled: edit() === null && !quick() && form.values.kiln !== null,
    })),
  )

  /** What the shown draft is about: a load, a mere report, or one firing. Each has a draft of its own. */
  const about = computed(() =>
    edit() === null ? (quick() ? 'report-only' : 'pack') : `pack.${edit()}`,
  )
  const begun = ref<string | null>(null)
  const ready = computed(() => begun.value === about.value)
  const known = computed(
    () =>
      catalogue.data.value !== undefined &&
      (edit() === null || (editing.data.value !== undefined && editing.isFetchedAfterMount.value)),
  )
  watch(
    [about, known],
    () => {
      if (ready.value || !known.value) return
      begun.value = about.value
      reason.value = ''
      meanwhile.value = null
      pack.begin(
        draftKey(user, network(), about.value),
        edit() === null ? null : (editing.data.value ?? null),
      )
    },
    { immediate: true },
  )

  function send(): Promise<boolean> {
    form.values.deviceTime ??= new Date().toISOString()
    return form.send()
  }

  async function submit(draft: PackDraft): Promise<FiringDetail> {
    const fields = {
      ...packProblems(draft),
      ...(amends() && !reason.value.trim() ? { reason: 'Say why.' } : {}),
    }
    if (Object.keys(fields).length > 0)
      throw new ApiError({ status: 400, code: 'invalid', message: '', fields })
    try {
      return await sendRevision(network(), draft.firing, draft.revision, bodyOf(draft))
    } catch (error) {
      if (!(error instanceof ApiError)) throw error
      if (error.code === 'different-body' || error.code === 'stale')
        return await sendOnTop(draft, error)
      throw beside(error)
    }
  }

  const amends = (): boolean =>
    edit() !== null && (meanwhile.value ?? editing.data.value)?.status === 'reported'

  function bodyOf(draft: PackDraft): RevisionInput {
    const { base, deviceTime } = draft
    const pack = packBodyOf(draft)
    const now = editing.data.value
    if (!amends() || !now) return { kind: 'pack', base, deviceTime, pack }
    const { report } = reportBodyOf(draftOf(now, draft.revision), makeUid)
    const lots = [...pack.lots.map(({ uid }) => uid), pack.rest].map(
      (lot) => report.lots.find((each) => each.lot === lot) ?? { lot, notLookedAt: 0, losses: [] },
    )
    return {
      kind: 'amend',
      base,
      deviceTime,
      pack,
      report: { ...report, lots },
      reason: reason.value,
    }
  }

  /** An earlier try of ours had arrived: what was changed since goes on top of it. Someone else's change is shown. */
  async function sendOnTop(draft: PackDraft, refusal: ApiError): Promise<FiringDetail> {
    const now = await getFiring(network(), draft.firing)
    const ours =
      now.status === 'packed' &&
      now.revisions.at(-1)?.number === now.revision &&
      newest(now)?.uid === draft.revision
    if (!ours) {
      meanwhile.value = now
      throw new ApiError({
        status: refusal.status,
        code: refusal.code,
        message: 'Somebody changed this firing meanwhile. What you entered is still here.',
      })
    }
    Object.assign(form.values, { base: now.revision, revision: makeUid() })
    const next = { ...draft, base: form.values.base, revision: form.values.revision }
    return sendRevision(network(), next.firing, next.revision, bodyOf(next))
  }

  const newest = (firing: FiringDetail) =>
    firing.revisions.find(({ number }) => number === firing.revision)

  /** After a look at what changed: mine on top of it. */
  async function putOnTop(): Promise<void> {
    if (!meanwhile.value) return
    queries.setQueryData(firingQuery(network(), meanwhile.value.uid).queryKey, meanwhile.value)
    Object.assign(form.values, { base: meanwhile.value.revision, revision: makeUid() })
    meanwhile.value = null
    await send()
  }

  /** Paths of the server's messages as the form has them. */
  function beside(error: ApiError): ApiError {
    const fields = Object.fromEntries(
      Object.entries(error.fields).map(([path, message]) => [path.replace(/^pack\./, ''), message]),
    )
    return new ApiError({ status: error.status, code: error.code, message: error.message, fields })
  }

  async function done(firing: FiringDetail, draft: PackDraft): Promise<void> {
    recent.remember(draft)
    pack.drop()
    queries.setQueryData(firingQuery(network(), firing.uid).queryKey, firing)
    for (const key of ['firings', 'today', 'losses', 'catalogue', 'last-firing'])
      void queries.invalidateQueries({ queryKey: [key, network()] })
    if (!quick())
      toast.show(
        edit() === null ? 'Packed. It waits for its report on Today.' : 'The load is corrected.',
      )
    await router.replace({
      name: quick() ? 'firing-report' : 'firing',
      params: { network: network(), id: firing.uid },
    })
  }

  return {
    catalogue,
    editing,
    last,
    form,
    pack,
    recent,
    reason,
    meanwhile,
    ready,
    amends: computed(amends),
    send,
    putOnTop,
  }
}
