import { computed } from 'vue'
import type { ComputedRef } from 'vue'
import { useRoute, useRouter } from 'vue-router'
import type { LocationQuery, LocationQueryRaw } from 'vue-router'
import type { z } from 'zod'

/** Filters out of a query: what is missing or not allowed takes its default. */
export function readFilters<S extends z.ZodObject>(schema: S, query: LocationQuery): z.output<S> {
  const entries = Object.entries(schema.shape).map(([key, field]) => {
    const raw = query[key]
    const given = (field as z.ZodType).safeParse((Array.isArray(raw) ? raw[0] : raw) ?? undefined)
    return [key, given.success ? given.data : defaultOf(field as z.ZodType)] as const
  })
  return Object.fromEntries(entries.filter(([, value]) => value !== undefined)) as z.output<S>
}

/** Filters as a query; defaults are not in it, so that an address says only what was chosen. */
export function writeFilters<S extends z.ZodObject>(
  schema: S,
  filters: Record<string, unknown>,
): LocationQueryRaw {
  const entries = Object.entries(schema.shape).flatMap(([key, field]): [string, string][] => {
    const value = filters[key]
    if (typeof value !== 'string' && typeof value !== 'number' && typeof value !== 'boolean')
      return []
    return value === '' || value === defaultOf(field as z.ZodType) ? [] : [[key, String(value)]]
  })
  return Object.fromEntries(entries)
}

function defaultOf(field: z.ZodType): unknown {
  const nothing = field.safeParse(undefined)
  return nothing.success ? nothing.data : undefined
}

export interface RouteFilters<F> {
  /** Cache key and request in one. */
  filters: ComputedRef<F>
  /** Changes some, keeps the others, and starts at page 1 again unless it sets the page. */
  update: (changes: { [K in keyof F]?: F[K] | null | undefined }) => void
  reset: () => void
  isDefault: ComputedRef<boolean>
}

/**
 * The filters of a page, kept in its address. Every key of `schema` has a default or is optional.
 * They stand still while the person is on the way to another page, so that no query is asked for it.
 */
export function useRouteFilters<S extends z.ZodObject>(schema: S): RouteFilters<z.output<S>> {
  type F = z.output<S>
  const route = useRoute()
  const router = useRouter()
  const own = route.name
  const filters = computed<F>((before) =>
    route.name !== own && before ? before : readFilters(schema, route.query),
  )

  function update(changes: { [K in keyof F]?: F[K] | null | undefined }): void {
    const next: Record<string, unknown> = { ...filters.value, ...changes }
    if ('page' in schema.shape && !('page' in changes)) delete next.page
    void router.push({ params: route.params, query: writeFilters(schema, next), hash: route.hash })
  }

  return {
    filters,
    update,
    reset: () => void router.push({ params: route.params, query: {} }),
    isDefault: computed(() => Object.keys(writeFilters(schema, filters.value)).length === 0),
  }
}
