import { computed, shallowRef, watch } from 'vue'
import { useQuery, useQueryClient } from '@tanstack/vue-query'
import { useRouter } from 'vue-router'
import type { FiringDetail } from '../../../server/contract/firings.js'
import { lotName, outcomeWords } from '../../../server/shared/sentences/firing.js'
import { plural } from '../../../server/shared/plural.js'
import { firingQuery } from '../../api/firings'
import { useSessionStore } from '../../stores/session'
import { useToast } from '../useToast'
import { draftKey } from './draftStorage'
import { totalOf } from './reportDraft'
import { useReportDraft } from './useReportDraft'
import { useReportSending } from './useReportSending'

interface Options {
  network: () => string
  firing: () => string
}

/** The report of a firing from opening the page to its arrival. */
export function useReport({ network, firing: id }: Options) {
  const router = useRouter()
  const queries = useQueryClient()
  const session = useSessionStore()
  const toast = useToast()
  // Asked anew each time: what is reported must rest on what is there now.
  const query = useQuery(
    computed(() => ({
      ...firingQuery(network(), id()),
      staleTime: 0,
      refetchOnWindowFocus: false,
    })),
  )
  const drafting = useReportDraft()
  /** The firing that the draft rests on; a later look does not move it under the thumb. */
  const firing = shallowRef<FiringDetail | null>(null)

  const there = computed(() => ({ name: 'firing', params: { network: network(), id: id() } }))
  const sending = useReportSending({
    network,
    firing: id,
    draft: () => drafting.draft.value,
    keep: drafting.note,
    arrived,
  })

  watch(
    () => [query.data.value, query.isFetchedAfterMount.value] as const,
    ([now, fresh]) => {
      if (now && fresh && firing.value?.uid !== now.uid) begin(now)
    },
    { immediate: true },
  )

  function begin(now: FiringDetail): void {
    firing.value = now
    drafting.begin(draftKey(session.user?.uid ?? '', network(), `report.${now.uid}`), now)
    const draft = drafting.draft.value
    if (draft && now.revisions.some((revision) => revision.uid === draft.revision)) {
      drafting.arrived()
      toast.show('This report had arrived already.')
      void router.replace(there.value)
    } else if (draft && draft.base !== now.revision) sending.meanwhile.value = now
  }

  async function arrived(now: FiringDetail): Promise<void> {
    const amended = drafting.draft.value?.kind === 'amend'
    drafting.arrived()
    queries.setQueryData(firingQuery(network(), id()).queryKey, now)
    for (const key of ['firings', 'today', 'losses'])
      void queries.invalidateQueries({ queryKey: [key, network()] })
    toast.show(
      `${amended ? 'Amended' : 'Reported'}: ${plural(now.pieces - now.turnedAway, 'piece')}, ${outcomeWords(now)}.`,
    )
    await router.replace(there.value)
  }

  /** After a look at what changed: mine goes on top of it, or is given up. */
  function settle(whose: 'mine' | 'theirs'): void {
    const now = sending.meanwhile.value
    if (!now) return
    firing.value = now
    if (whose === 'mine') drafting.putOnTop(now)
    else drafting.startAgain(now)
    sending.meanwhile.value = null
  }

  const total = computed(() => totalOf(drafting.draft.value?.lots ?? []))
  /** Lots that hold pieces, with their name and what the draft says of them. */
  const lots = computed(() =>
    (firing.value?.lots ?? []).flatMap((lot, position, all) => {
      const draft = drafting.draft.value?.lots.find((each) => each.lot === lot.uid)
      const many = all.filter((each) => each.pieces > 0).length
      return draft && draft.fired > 0 ? [{ lot, draft, name: lotName(lot, position, many) }] : []
    }),
  )

  return { query, firing, there, drafting, sending, settle, total, lots }
}
