import { useQuery } from '@tanstack/vue-query'
import { computed } from 'vue'
import { FACTORS } from '../../server/shared/factors.js'
import { FAULT_TREE, withAncestors } from '../../server/shared/faults/index.js'
import { FIRING_KINDS, FIRING_KIND_NAMES } from '../../server/shared/kinds.js'
import type { Choice } from './choice'
import { catalogueQuery } from '../api/catalogue'
import { useNetworkSlug } from './useNetwork'

/** Faults by family, coarse nodes before those below them. */
const FAULTS: readonly Choice[] = FAULT_TREE.map((node) => {
  const root = withAncestors(node.id).at(-1)
  return {
    value: node.id,
    label: node.name.charAt(0).toLowerCase() + node.name.slice(1),
    group: FAULT_TREE.find(({ id }) => id === root)?.name,
  }
})

const KINDS: readonly Choice[] = FIRING_KINDS.map((kind) => ({
  value: kind,
  label: `${FIRING_KIND_NAMES[kind]} firings`,
}))

/** Choices of the shelf sentence: studios and kilns of this network, faults, kinds, factors. */
export function useFilterOptions() {
  const network = useNetworkSlug()
  const catalogue = useQuery(computed(() => catalogueQuery(network.value)))
  const studios = computed<Choice[]>(() =>
    (catalogue.data.value?.studios ?? []).map(({ uid, name }) => ({ value: uid, label: name })),
  )
  /** Kilns, of one studio where one is chosen. */
  function kilnsOf(studio: string | undefined): Choice[] {
    const names = new Map(studios.value.map(({ value, label }) => [value, label]))
    return (catalogue.data.value?.kilns ?? [])
      .filter((kiln) => !studio || kiln.studio === studio)
      .map(({ uid, name, studio: of }) => ({ value: uid, label: name, group: names.get(of) }))
  }
  return {
    studios,
    kilnsOf,
    faults: FAULTS,
    kinds: KINDS,
    factors: FACTORS.filter(({ id }) => id !== 'kiln').map(({ id, name }) => ({
      value: id,
      label: name.charAt(0).toLowerCase() + name.slice(1),
    })),
  }
}
