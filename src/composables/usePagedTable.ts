import { computed } from 'vue'
import type { ComputedRef, Ref } from 'vue'

interface PageAnswer<Row> {
  rows: Row[]
  total: number
  page: number
  pageSize: number
}

interface PagedQuery<Row> {
  data: Ref<PageAnswer<Row> | undefined>
  error: Ref<Error | null>
  isFetching: Ref<boolean>
  refetch: () => unknown
}

interface Options<Row> {
  filters: ComputedRef<{ page: number; sort?: string | undefined }>
  update: (changes: { page?: number; sort?: never }) => void
  query: PagedQuery<Row>
}

/** What a DataTable wants, from a list that is paged in SQL and sorted by the address: `<DataTable v-bind="table">`. */
export function usePagedTable<Row>({ filters, update, query }: Options<Row>) {
  return computed(() => ({
    rows: query.data.value?.rows,
    total: query.data.value?.total ?? 0,
    page: filters.value.page,
    pageSize: query.data.value?.pageSize ?? 25,
    sort: filters.value.sort,
    error: query.error.value,
    busy: query.isFetching.value,
    'onUpdate:page': (page: number) => update({ page }),
    'onUpdate:sort': (sort: string) => update({ sort: sort as never }),
    onRetry: () => void query.refetch(),
  }))
}
