import { describe, expect, it } from 'vitest'
import DataTable from '../../../src/components/ui/DataTable.vue'
import { byName, mountUi } from '../../support/components'

interface Row {
  uid: string
  kiln: string
  lost: number
}
const rows: Row[] = [
  { uid: 'a', kiln: 'Front', lost: 4 },
  { uid: 'b', kiln: 'Back', lost: 0 },
]
const columns = [
  { key: 'kiln', label: 'kiln', sortable: true },
  {
    key: 'lost',
    label: 'lost',
    align: 'end',
    sortable: true,
    text: (row: Row) => `${row.lost} of 65`,
  },
]
const table = (props: Record<string, unknown> = {}, slots: Record<string, unknown> = {}) =>
  mountUi(DataTable, {
    props: { columns, rows, rowKey: (row: Row) => row.uid, caption: 'Firings', ...props },
    slots,
  })

describe('DataTable', () => {
  it('draws a row a thing, with the text of its columns', async () => {
    const { wrapper } = await table()
    expect(
      wrapper.findAll('tbody tr').map((row) => row.findAll('td').map((cell) => cell.text())),
    ).toEqual([
      ['Front', '4 of 65'],
      ['Back', '0 of 65'],
    ])
  })

  it('says what it is a table of', async () => {
    const { wrapper } = await table()
    expect(wrapper.get('caption').text()).toBe('Firings')
  })

  it('makes one link of each row', async () => {
    const { wrapper } = await table({
      rowLink: (row: Row) => ({ name: 'firing', params: { network: 'kettle', id: row.uid } }),
    })
    expect(wrapper.findAll('tbody a').map((link) => link.attributes('href'))).toEqual([
      '/kettle/firings/a',
      '/kettle/firings/b',
    ])
  })

  it('asks for the largest numbers first, and then the smallest', async () => {
    const { wrapper } = await table()
    byName('th button', 'lost').click()
    await wrapper.setProps({ sort: '-lost' })
    expect(wrapper.findAll('th')[1]?.attributes('aria-sort')).toBe('descending')
    byName('th button', 'lost').click()
    expect(wrapper.emitted('update:sort')).toEqual([['-lost'], ['lost']])
  })

  it('asks for words from the first letter', async () => {
    const { wrapper } = await table({ sort: '-lost' })
    byName('th button', 'kiln').click()
    expect(wrapper.emitted('update:sort')).toEqual([['kiln']])
  })

  it('says where in the list one is, and pages on and back', async () => {
    const { wrapper } = await table({ page: 2, pageSize: 25, total: 1402 })
    expect(wrapper.get('nav').text()).toContain('26–50 of 1,402')
    byName('nav button', 'next').click()
    byName('nav button', 'previous').click()
    expect(wrapper.emitted('update:page')).toEqual([[3], [1]])
  })

  it('has nowhere to go on the last page', async () => {
    await table({ page: 57, pageSize: 25, total: 1402 })
    expect((byName('nav button', 'next') as HTMLButtonElement).disabled).toBe(true)
  })

  it('offers no paging for a single page', async () => {
    const { wrapper } = await table({ page: 1, pageSize: 25, total: 2 })
    expect(wrapper.findAll('nav button')).toHaveLength(0)
    expect(wrapper.get('nav').text()).toBe('1–2 of 2')
  })

  it('is busy, with its heads, while the rows are on their way', async () => {
    const { wrapper } = await table({ rows: undefined })
    expect(wrapper.get('table').attributes('aria-busy')).toBe('true')
    expect(wrapper.findAll('th')).toHaveLength(2)
  })

  it('says that there is nothing', async () => {
    const { wrapper } = await table({ rows: [], empty: 'No firing matches.' })
    expect(wrapper.get('tbody').text()).toBe('No firing matches.')
  })

  it('shows what went wrong, and tries again', async () => {
    const { wrapper } = await table({
      rows: undefined,
      error: new Error('The server cannot be reached.'),
    })
    expect(wrapper.get('[role="alert"]').text()).toContain('The server cannot be reached.')
    byName('button', 'Try again').click()
    expect(wrapper.emitted('retry')).toHaveLength(1)
  })

  it('keeps its rows when a later look fails', async () => {
    const { wrapper } = await table({ error: new Error('away') })
    expect(wrapper.findAll('tbody tr')).toHaveLength(2)
  })

  it('can be saved as CSV', async () => {
    const { wrapper } = await table({ csvHref: '/api/networks/kettle/firings.csv?kind=glaze' })
    expect(wrapper.get('a[download]').attributes('href')).toBe(
      '/api/networks/kettle/firings.csv?kind=glaze',
    )
  })

  it('lets the page draw a cell', async () => {
    const { wrapper } = await table(
      {},
      { 'cell-kiln': '<template #cell-kiln="{ row }"><em>{{ row.kiln }}!</em></template>' },
    )
    expect(wrapper.get('em').text()).toBe('Front!')
  })
})
