import { flushPromises } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { defineComponent } from 'vue'
import { z } from 'zod'
import {
  readFilters,
  useRouteFilters,
  writeFilters,
} from '../../../src/composables/useRouteFilters'
import { mountUi } from '../../support/components'

const schema = z.object({
  kind: z.enum(['bisque', 'glaze']).default('glaze'),
  fault: z.string().optional(),
  q: z.coerce.number().min(0).max(0.1).default(0.1),
  page: z.coerce.number().int().min(1).default(1),
})

describe('readFilters', () => {
  it('takes defaults for what the address does not say', () => {
    expect(readFilters(schema, {})).toEqual({ kind: 'glaze', q: 0.1, page: 1 })
  })

  it('takes what the address says, as numbers where they are numbers', () => {
    expect(readFilters(schema, { kind: 'bisque', q: '0.01', page: '3', fault: 's-crack' })).toEqual(
      {
        kind: 'bisque',
        q: 0.01,
        page: 3,
        fault: 's-crack',
      },
    )
  })

  it('takes the default of a value that is not allowed, and leaves the others alone', () => {
    expect(readFilters(schema, { kind: 'salt', page: '-2', fault: 's-crack' })).toEqual({
      kind: 'glaze',
      q: 0.1,
      page: 1,
      fault: 's-crack',
    })
  })

  it('takes the first of a value that is there twice', () => {
    expect(readFilters(schema, { kind: ['bisque', 'glaze'] }).kind).toBe('bisque')
  })
})

describe('writeFilters', () => {
  it('leaves defaults and empty values out of the address', () => {
    expect(writeFilters(schema, { kind: 'glaze', fault: '', q: 0.1, page: 1 })).toEqual({})
    expect(writeFilters(schema, { kind: 'bisque', fault: undefined, page: 2 })).toEqual({
      kind: 'bisque',
      page: '2',
    })
  })
})

describe('useRouteFilters', () => {
  const start = async (at: string) => {
    let made!: ReturnType<typeof useRouteFilters<typeof schema>>
    const Page = defineComponent({
      setup() {
        made = useRouteFilters(schema)
        return () => null
      },
    })
    const { router } = await mountUi(Page, { at })
    return { made, router }
  }

  it('puts a change into the address and begins at page 1 again', async () => {
    const { made, router } = await start('/kettle/firings?page=4&kind=bisque')
    made.update({ fault: 's-crack' })
    await flushPromises()
    expect(router.currentRoute.value.fullPath).toBe('/kettle/firings?kind=bisque&fault=s-crack')
    expect(made.filters.value).toMatchObject({ kind: 'bisque', fault: 's-crack', page: 1 })
  })

  it('keeps the filters when the page is turned', async () => {
    const { made, router } = await start('/kettle/firings?kind=bisque')
    made.update({ page: 2 })
    await flushPromises()
    expect(router.currentRoute.value.fullPath).toBe('/kettle/firings?kind=bisque&page=2')
  })

  it('drops a filter that is set to nothing', async () => {
    const { made, router } = await start('/kettle/firings?fault=s-crack')
    made.update({ fault: undefined })
    await flushPromises()
    expect(router.currentRoute.value.fullPath).toBe('/kettle/firings')
    expect(made.isDefault.value).toBe(true)
  })

  it('stands still while the person goes to another page', async () => {
    const { made, router } = await start('/kettle/firings?kind=bisque')
    expect(made.filters.value.kind).toBe('bisque')
    await router.push('/kettle/losses?page=9')
    expect(made.filters.value).toMatchObject({ kind: 'bisque', page: 1 })
  })
})
