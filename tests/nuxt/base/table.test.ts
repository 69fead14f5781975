import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import { h } from 'vue'
import UiTable from '~/components/base/UiTable.vue'

const COLUMNS = [
  { key: 'name', label: 'Build', sortable: true },
  { key: 'customer', label: 'Customer', sortable: true },
  { key: 'pan', label: 'Pan', numeric: true },
]
const ROWS = [
  { name: 'Wagon', customer: 'R. Halvorsen', pan: 209 },
  { name: 'Camper', customer: null, pan: 183 },
  { name: 'Diesel', customer: 'Pender', pan: 225 },
]

const mountTable = (props: object = {}) =>
  mountSuspended(UiTable, {
    props: {
      caption: 'Builds',
      columns: COLUMNS,
      rows: ROWS,
      rowKey: (row: { name?: string }) => row.name ?? '',
      ...props,
    },
    slots: {
      'cell-name': ({ row }: { row: object }) => {
        const name = 'name' in row ? String(row.name) : ''
        return h('a', { href: `/${name}` }, name)
      },
    },
    attachTo: document.body,
  })

describe('a table', () => {
  it('is named, and has a heading for every column', async () => {
    const table = await mountTable()
    expect(table.find('caption').text()).toBe('Builds')
    expect(table.findAll('th').map((th) => [th.text(), th.attributes('scope')])).toEqual([
      ['Build', 'col'],
      ['Customer', 'col'],
      ['Pan', 'col'],
    ])
    expect(table.findAll('tbody tr').map((tr) => tr.findAll('td').map((td) => td.text()))).toEqual([
      ['Wagon', 'R. Halvorsen', '209'],
      ['Camper', '–', '183'],
      ['Diesel', 'Pender', '225'],
    ])
  })

  it('asks to be sorted by a column, the other way round at the second press', async () => {
    const table = await mountTable({ sort: { key: 'customer', direction: 'asc' } })
    const sorted = () => table.findAll('th').map((th) => th.attributes('aria-sort'))
    expect(sorted()).toEqual([undefined, 'ascending', undefined])

    const [byName, byCustomer] = table.findAll('th button')
    await byCustomer?.trigger('click')
    expect(table.emitted('update:sort')?.at(-1)).toEqual([{ key: 'customer', direction: 'desc' }])
    await byName?.trigger('click')
    expect(table.emitted('update:sort')?.at(-1)).toEqual([{ key: 'name', direction: 'asc' }])

    await table.setProps({ sort: { key: 'name', direction: 'desc' } })
    expect(sorted()).toEqual(['descending', undefined, undefined])
  })

  it('offers no sorting where a column has none', async () => {
    const table = await mountTable()
    expect(table.findAll('th')[2]?.find('button').exists()).toBe(false)
  })

  it('moves between the links of its rows by keys', async () => {
    const table = await mountTable()
    const links = table.findAll('tbody a').map((link) => link.element as HTMLElement)
    const at = () => links.indexOf(document.activeElement as HTMLElement)
    const press = async (key: string) => {
      document.activeElement?.dispatchEvent(new KeyboardEvent('keydown', { key, bubbles: true }))
      await Promise.resolve()
    }
    links[0]?.focus()
    await press('ArrowDown')
    expect(at()).toBe(1)
    await press('End')
    expect(at()).toBe(2)
    await press('ArrowDown')
    expect(at()).toBe(2)
    await press('ArrowUp')
    expect(at()).toBe(1)
    await press('Home')
    expect(at()).toBe(0)
    await press('ArrowLeft')
    expect(at()).toBe(0)
    table.unmount()
  })
})
