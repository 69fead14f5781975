import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import { nextTick } from 'vue'
import { createGenericCooler } from '#shared/build-sheet/generic-cooler'
import { createGenericTank } from '#shared/cooling-loop/generic-tank'
import { markLoop, type LoopEdit } from '#shared/cooling-loop/edit'
import type { Cooler } from '#shared/schemas/heat-input'
import CoolingLoop from '~/components/cooling-loop/CoolingLoop.vue'

const TANK: Cooler = createGenericTank()
const FRONT: Cooler = {
  ...createGenericCooler({ construction: 'stacked-plate', position: 'ahead-of-condenser', size: 'medium' }),
  name: 'Front cooler',
}
const REMOTE: Cooler = {
  ...createGenericCooler({ construction: 'plate-fin', position: 'remote', size: 'small', fan: true }),
  name: 'Remote',
}

async function mountLoop(coolers: Cooler[] = [TANK, FRONT, REMOTE], props: Record<string, unknown> = {}) {
  const loop = await mountSuspended(CoolingLoop, {
    attachTo: document.body,
    props: {
      coolers,
      selected: null,
      'onUpdate:coolers': (next: Cooler[]) => loop.setProps({ coolers: next }),
      'onUpdate:selected': (next: number | null) => loop.setProps({ selected: next }),
      ...props,
    },
    slots: { details: '<p data-details>fields</p>' },
  })
  const items = () => loop.findAll('[data-cooler]')
  return {
    loop,
    items,
    item: (index: number) => loop.find(`[data-cooler="${index}"]`),
    button: (label: string) => {
      const found = loop.findAll('button').find((one) => one.text() === label)
      if (!found) throw new Error(`no button “${label}”`)
      return found
    },
    names: () => (loop.props('coolers') as Cooler[]).map(({ name }) => name),
    coolers: () => loop.props('coolers') as Cooler[],
    said: () => loop.find('[role="status"]').text(),
    focused: () => document.activeElement?.getAttribute('data-cooler'),
  }
}

describe('the cooling loop', () => {
  it('is one stop of the tab key, and arrows, home and end go along the loop', async () => {
    const { items, item, focused } = await mountLoop()
    expect(items().map((one) => one.attributes('tabindex'))).toEqual(['0', '-1', '-1'])
    ;(item(0).element as HTMLElement).focus()
    await nextTick()
    await item(0).trigger('keydown', { key: 'ArrowRight' })
    expect(focused()).toBe('1')
    await item(1).trigger('keydown', { key: 'End' })
    expect(focused()).toBe('2')
    await item(2).trigger('keydown', { key: 'ArrowDown' })
    expect(focused()).toBe('2')
    await item(2).trigger('keydown', { key: 'Home' })
    expect(focused()).toBe('0')
    await nextTick()
    expect(items().map((one) => one.attributes('tabindex'))).toEqual(['0', '-1', '-1'])
  })

  it('is named for whoever hears it: each cooler, and the whole in words', async () => {
    const { loop, item } = await mountLoop()
    expect(item(1).attributes('aria-label')).toMatch(
      /^2\. Front cooler: stacked plate, ahead of the condenser; rated/,
    )
    expect(loop.find('figcaption').text()).toBe('The oil meets Radiator tank, then Front cooler, then Remote')
    expect(loop.find('svg').attributes('aria-hidden')).toBe('true')
    expect(loop.findAll('ol li').map((line) => line.text().slice(0, 20))).toEqual([
      'The oil leaves by th',
      '1. Radiator tank: in',
      '2. Front cooler: sta',
      '3. Remote: plate and',
      'The return line brin',
    ])
  })

  it('moves, joins, parts and takes out by its buttons, and says so', async () => {
    const { loop, item, button, names, coolers, said } = await mountLoop()
    await item(1).trigger('click')
    expect(loop.find('[data-details]').exists()).toBe(true)
    await button('Earlier in the loop').trigger('click')
    expect(names()).toEqual(['Front cooler', 'Radiator tank', 'Remote'])
    expect(said()).toBe('Front cooler is first of 3 in the loop.')
    expect(button('Earlier in the loop').attributes('aria-disabled')).toBe('true')
    await button('Earlier in the loop').trigger('click')
    expect(names()).toEqual(['Front cooler', 'Radiator tank', 'Remote'])
    await button('Later').trigger('click')
    await button('Beside the one before').trigger('click')
    expect(coolers().map(({ parallelWithPrevious }) => parallelWithPrevious ?? false)).toEqual([
      false,
      true,
      false,
    ])
    expect(said()).toBe('Front cooler is first of 2 in the loop, beside Radiator tank.')
    await button('Back in line').trigger('click')
    expect(coolers().every(({ parallelWithPrevious }) => !parallelWithPrevious)).toBe(true)
    await button('Take out').trigger('click')
    expect(names()).toEqual(['Radiator tank', 'Remote'])
    expect(said()).toMatch(/^Front cooler is out of the loop\./)
  })

  it('keeps the focus on the button that moves, and on the next cooler when one is taken out', async () => {
    const { item, button, focused } = await mountLoop()
    await item(1).trigger('click')
    const earlier = button('Earlier in the loop')
    ;(earlier.element as HTMLElement).focus()
    await earlier.trigger('click')
    expect(document.activeElement).toBe(button('Earlier in the loop').element)
    await button('Take out').trigger('click')
    await nextTick()
    expect(focused()).toBe('0')
  })

  it('moves by alt and arrow from the cooler itself', async () => {
    const { item, names, focused } = await mountLoop()
    ;(item(2).element as HTMLElement).focus()
    await item(2).trigger('keydown', { key: 'ArrowLeft', altKey: true })
    await nextTick()
    expect(names()).toEqual(['Radiator tank', 'Remote', 'Front cooler'])
    expect(focused()).toBe('1')
  })

  it('sets where a cooler sits in the air; one in the tank has no choice', async () => {
    const { loop, item, coolers } = await mountLoop()
    await item(2).trigger('click')
    await loop.find('[role="group"] select').setValue('behind-condenser')
    expect(coolers()[2]).toMatchObject({ position: 'behind-condenser' })
    expect(coolers()[2]).not.toHaveProperty('fanFlowM3S')
    await item(0).trigger('click')
    expect(loop.find('[role="group"] select').exists()).toBe(false)
  })

  it('adds some cooler as the last, and none beyond six', async () => {
    const { loop, button, names, coolers } = await mountLoop([])
    expect(loop.text()).toContain('No cooler: the oil comes straight back')
    await button('Add as the last').trigger('click')
    expect(names()).toEqual(['Medium stacked plate cooler'])
    await loop.find('details select').setValue('in-tank')
    await button('Add as the last').trigger('click')
    expect(coolers()[1]).toMatchObject({ construction: 'in-tank', position: 'radiator-tank' })
    await loop.setProps({ coolers: Array.from({ length: 6 }, () => FRONT) })
    expect(loop.text()).toContain('The loop takes at most 6 coolers')
  })

  it('tells a sheet where each cooler was before', async () => {
    const { loop, item, button } = await mountLoop()
    await item(2).trigger('click')
    await button('Earlier in the loop').trigger('click')
    const [edit] = loop.emitted<[LoopEdit]>('edit')?.at(-1) ?? []
    expect(edit).toMatchObject({ sources: [0, 2, 1], at: 1 })
    expect(edit?.coolers).toEqual(loop.emitted<[Cooler[]]>('update:coolers')?.at(-1)?.[0])
  })

  it('only shows when it may not be changed', async () => {
    const { loop, item, names } = await mountLoop([TANK, FRONT], { readOnly: true })
    await item(1).trigger('click')
    expect(loop.find('[data-details]').exists()).toBe(true)
    expect(loop.findAll('button').filter((one) => one.text() !== '')).toEqual([])
    await item(1).trigger('keydown', { key: 'ArrowLeft', altKey: true })
    expect(names()).toEqual(['Radiator tank', 'Front cooler'])
  })

  it('shows no numbers that belong to another loop', async () => {
    const reading = {
      mark: markLoop([TANK, FRONT]),
      sumpC: 100,
      inletC: 110,
      returnC: 80,
      flowM3S: 1.26e-4,
      throughShare: 1,
      afterGroupC: [104, 80],
      coolerHeatW: [1000, 4000],
      air: { outsideC: 38, aheadC: 38, behindCondenserC: 43, atRadiatorC: 47, underbodyC: 53 },
    }
    const { loop } = await mountLoop([TANK, FRONT], { reading })
    expect(loop.text().replaceAll('\u00a0', ' ')).toContain('230 °F')
    await loop.setProps({ coolers: [FRONT, TANK] })
    expect(loop.text().replaceAll('\u00a0', ' ')).not.toContain('230 °F')
  })
})
