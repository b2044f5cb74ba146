import { useQueryClient } from '@tanstack/vue-query'
import type { ComputedRef } from 'vue'
import type { Archivable } from '../api/settings'
import { setArchived } from '../api/settings'
import { useToast } from './useToast'

/** Archives things of the settings and brings them back, each with one way to undo it. */
export function useArchive(network: ComputedRef<string>) {
  const queries = useQueryClient()
  const toast = useToast()

  async function turn(
    what: Archivable,
    uid: string,
    name: string,
    archived: boolean,
  ): Promise<void> {
    try {
      await setArchived(network.value, what, uid, archived)
      toast.show(archived ? `${name} is archived. Old firings keep it.` : `${name} is back.`, {
        action: { label: 'Undo', run: () => turn(what, uid, name, !archived) },
      })
    } catch (error) {
      toast.fail(error)
    }
    await refresh()
  }
  /** What was changed in the settings is asked for again, in the lists and in the catalogue. */
  async function refresh(): Promise<void> {
    await Promise.all([
      queries.invalidateQueries({ queryKey: ['settings', network.value] }),
      queries.invalidateQueries({ queryKey: ['catalogue', network.value] }),
    ])
  }
  return { turn, refresh }
}
