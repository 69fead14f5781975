import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import BuildsCards from '~/components/builds/BuildsCards.vue'
import BuildsEmpty from '~/components/builds/BuildsEmpty.vue'
import BuildsFilter from '~/components/builds/BuildsFilter.vue'
import BuildsPages from '~/components/builds/BuildsPages.vue'
import BuildsTable from '~/components/builds/BuildsTable.vue'
import { useSessionStore } from '~/stores/session'
import { readBuildsQuery } from '~/utils/builds-query'
import type { BuildListItem } from '#shared/schemas/build'

const BUILDS: BuildListItem[] = [
  {
    id: '01890a5d-ac96-774b-bcce-b302099a8001',
    name: 'Wagon with the small V8',
    customerName: 'R. Halvorsen',
    stage: 'in-work',
    updatedAt: '2026-03-08T03:30:00.000Z',
    scenarioId: '01890a5d-ac96-774b-bcce-b302099a8002',
    peakSumpC: 100,
    peakCoolerInletC: 120,
    judgement: 'watch',
  },
  {
    id: '01890a5d-ac96-774b-bcce-b302099a8003',
    name: 'Trail rig',
    customerName: null,
    stage: 'call',
    updatedAt: '2026-03-01T12:00:00.000Z',
    scenarioId: null,
    peakSumpC: null,
    peakCoolerInletC: null,
    judgement: null,
  },
]
const plain = (text: string) => text.replaceAll('\u00a0', ' ')

afterEach(() => {
  useSessionStore().unitsChoice = 'us'
})

describe('the table of builds', () => {
  const mountTable = () =>
    mountSuspended(BuildsTable, { props: { builds: BUILDS, sort: { key: 'updated', direction: 'desc' } } })

  it('says of each build where it opens, how far it is, how hot it gets and what to do', async () => {
    const table = await mountTable()
    const rows = table.findAll('tbody tr').map((row) => row.findAll('td').map((cell) => plain(cell.text())))
    expect(rows.map((row) => row.slice(0, 6))).toEqual([
      ['Wagon with the small V8', 'R. Halvorsen', 'in work', '212 °F', '248 °F', 'watch'],
      ['Trail rig', '–', 'first call', '–', '–', 'not sized yet'],
    ])
    expect(table.findAll('tbody a').map((link) => link.attributes('href'))).toEqual([
      `/builds/${BUILDS[0]?.id}/scenarios/${BUILDS[0]?.scenarioId}`,
      `/builds/${BUILDS[1]?.id}`,
    ])
  })

  it('follows the switch of units', async () => {
    const table = await mountTable()
    useSessionStore().unitsChoice = 'metric'
    await vi.waitFor(() => expect(plain(table.find('tbody tr').text())).toContain('100 °C'))
  })
})

describe('the cards of builds', () => {
  it('say the same on a phone', async () => {
    const cards = await mountSuspended(BuildsCards, { props: { builds: BUILDS } })
    const [wagon, rig] = cards.findAll('li').map((card) => plain(card.text()))
    for (const part of [
      'Wagon with the small V8',
      'R. Halvorsen',
      'in work',
      'pan',
      '212',
      'watch',
      '248 °F',
    ])
      expect(wagon).toContain(part)
    for (const part of ['Trail rig', 'No customer', 'not sized yet']) expect(rig).toContain(part)
  })

  it('carry the judgement in the weight of their rule', async () => {
    const cards = await mountSuspended(BuildsCards, { props: { builds: BUILDS } })
    const rules = cards.findAll('li').map((card) => card.attributes('style') ?? '')
    expect(rules[0]).toContain('border-left-width: 2px')
    expect(rules[1]).toContain('border-left-width: 1px')
  })
})

describe('the filter of builds', () => {
  beforeEach(() => {
    vi.useFakeTimers()
  })
  afterEach(() => {
    vi.useRealTimers()
  })
  const lastQuery = (filter: { emitted: (name: string) => unknown[][] | undefined }) =>
    filter.emitted('update:modelValue')?.at(-1)?.[0]

  it('searches when the typing pauses, from the first page on', async () => {
    const filter = await mountSuspended(BuildsFilter, {
      props: { modelValue: readBuildsQuery({ page: '3' }) },
    })
    const input = filter.find('input[type="search"]')
    await input.setValue('wag')
    await input.setValue('wagon')
    expect(filter.emitted('update:modelValue')).toBeUndefined()
    vi.advanceTimersByTime(300)
    expect(filter.emitted('update:modelValue')).toHaveLength(1)
    expect(lastQuery(filter)).toMatchObject({ search: 'wagon', page: 1 })
  })

  it('searches at once on enter, and not again after the pause', async () => {
    const filter = await mountSuspended(BuildsFilter, { props: { modelValue: readBuildsQuery({}) } })
    await filter.find('input[type="search"]').setValue('wagon')
    await filter.find('form').trigger('submit')
    expect(lastQuery(filter)).toMatchObject({ search: 'wagon' })
    vi.advanceTimersByTime(300)
    expect(filter.emitted('update:modelValue')).toHaveLength(1)
  })

  it('filters by stage and, on a phone, orders the usual way round', async () => {
    const filter = await mountSuspended(BuildsFilter, {
      props: { modelValue: readBuildsQuery({ sort: 'name', direction: 'desc' }) },
    })
    const [stage, order] = filter.findAll('select')
    await stage?.setValue('quoted')
    expect(lastQuery(filter)).toMatchObject({ stage: 'quoted', page: 1 })
    await order?.setValue('customer')
    expect(lastQuery(filter)).toMatchObject({ sort: 'customer', direction: 'asc' })
  })
})

describe('the pages of the list', () => {
  const props = { pageSize: 25, linkTo: (page: number) => `/builds?page=${page}` }

  it('are not shown when one is enough', async () => {
    const pages = await mountSuspended(BuildsPages, { props: { ...props, page: 1, total: 25 } })
    expect(pages.find('nav').exists()).toBe(false)
  })

  it('lead to their neighbors and end at the ends', async () => {
    const pages = await mountSuspended(BuildsPages, { props: { ...props, page: 1, total: 51 } })
    expect(pages.text()).toContain('Page 1 of 3')
    expect(pages.find('a').attributes('href')).toBe('/builds?page=2')
    expect(pages.find('button').text()).toBe('Previous')
    await pages.setProps({ page: 3 })
    expect(pages.find('a').attributes('href')).toBe('/builds?page=2')
    expect(pages.find('button').text()).toBe('Next')
  })
})

describe('an empty list', () => {
  it('invites whoever may to begin', async () => {
    const props = { searched: false, pastEnd: false }
    const estimator = await mountSuspended(BuildsEmpty, { props: { ...props, mayCreate: true } })
    expect(estimator.find('a[href="/builds/new"]').text()).toBe('New build')
    const technician = await mountSuspended(BuildsEmpty, { props: { ...props, mayCreate: false } })
    expect(technician.text()).toContain('No builds yet')
    expect(technician.find('a').exists()).toBe(false)
  })

  it('leads back where a search or a page found nothing', async () => {
    for (const props of [
      { searched: true, pastEnd: false },
      { searched: false, pastEnd: true },
    ]) {
      const empty = await mountSuspended(BuildsEmpty, { props: { ...props, mayCreate: true } })
      await empty.find('button').trigger('click')
      expect(empty.emitted('clear')).toHaveLength(1)
    }
  })
})
