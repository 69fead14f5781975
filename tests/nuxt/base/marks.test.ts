import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it, vi } from 'vitest'
import GradeLine from '~/components/base/GradeLine.vue'
import UiButton from '~/components/base/UiButton.vue'
import UiDisclosure from '~/components/base/UiDisclosure.vue'
import UiJudgement from '~/components/base/UiJudgement.vue'
import UiNotice from '~/components/base/UiNotice.vue'
import UiSkeleton from '~/components/base/UiSkeleton.vue'
import { JudgementSchema } from '#shared/schemas/limits'

describe('a judgement', () => {
  it('is told by its word and by a sign of its own, not by color alone', async () => {
    const drawn = await Promise.all(
      JudgementSchema.options.map(async (judgement) => {
        const mark = await mountSuspended(UiJudgement, { props: { judgement } })
        const paths = mark
          .findAll('path')
          .map((path) => [path.attributes('d'), path.attributes('stroke-width')])
        expect(mark.find('svg').attributes('aria-hidden')).toBe('true')
        return { word: mark.text(), sign: JSON.stringify(paths) }
      }),
    )
    expect(drawn.map(({ word }) => word)).toEqual(['fine', 'watch', 'ease off', 'stop'])
    expect(new Set(drawn.map(({ sign }) => sign)).size).toBe(4)
  })
})

describe('a notice', () => {
  it('says its kind in a word', async () => {
    const notice = await mountSuspended(UiNotice, {
      props: { kind: 'ease-off', title: 'Hot line over its limit' },
      slots: { default: () => 'Drop a gear.' },
    })
    expect(notice.text()).toContain('Ease off')
    expect(notice.text()).toContain('Hot line over its limit')
    expect(notice.text()).toContain('Drop a gear.')
    expect(notice.attributes('role')).toBeUndefined()
  })

  it('is announced only when asked: an error at once, all else politely', async () => {
    const error = await mountSuspended(UiNotice, { props: { kind: 'error', live: true } })
    const note = await mountSuspended(UiNotice, { props: { kind: 'watch', live: true } })
    expect(error.attributes('role')).toBe('alert')
    expect(note.attributes('role')).toBe('status')
  })
})

describe('a button', () => {
  it('does nothing while busy, and keeps its focus', async () => {
    const pressed = vi.fn()
    const button = await mountSuspended(UiButton, { props: { busy: true }, attrs: { onClick: pressed } })
    expect(button.attributes('aria-busy')).toBe('true')
    expect(button.attributes('disabled')).toBeUndefined()
    await button.trigger('click')
    expect(pressed).not.toHaveBeenCalled()
    await button.setProps({ busy: false })
    await button.trigger('click')
    expect(pressed).toHaveBeenCalledTimes(1)
  })

  it('is a link where it leads somewhere, and a dead button where that is closed', async () => {
    const link = await mountSuspended(UiButton, { props: { to: '/method' } })
    expect(link.element.tagName).toBe('A')
    expect(link.attributes('href')).toBe('/method')
    const closed = await mountSuspended(UiButton, { props: { to: '/method', disabled: true } })
    expect(closed.element.tagName).toBe('BUTTON')
    expect(closed.attributes('disabled')).toBeDefined()
  })
})

describe('a disclosure', () => {
  it('opens in place and tells', async () => {
    const box = await mountSuspended(UiDisclosure, {
      props: { summary: 'How it was made' },
      slots: { default: () => 'By the converter.' },
    })
    const details = box.element as HTMLDetailsElement
    expect(details.open).toBe(false)
    details.open = true
    await box.trigger('toggle')
    expect(box.emitted('update:open')?.at(-1)).toEqual([true])
  })
})

describe('a skeleton', () => {
  it('says that something is loading, and hides its bars from readers', async () => {
    const skeleton = await mountSuspended(UiSkeleton, { props: { lines: 4, what: 'Loading the builds' } })
    expect(skeleton.attributes('role')).toBe('status')
    expect(skeleton.text()).toBe('Loading the builds')
    expect(skeleton.find('[aria-hidden="true"]').element.children).toHaveLength(4)
  })
})

describe('the grade line', () => {
  const marks = [
    { along: 0.5, text: 'watch 200 °F', judgement: 'watch' as const },
    { along: 0.8, text: 'stop 240 °F', judgement: 'stop' as const },
  ]

  it('gains weight from each mark on', async () => {
    const line = await mountSuspended(GradeLine, { props: { marks } })
    expect(line.findAll('path').map((path) => path.attributes('stroke-width'))).toEqual(['1', '2', '4'])
    expect(line.text()).toContain('watch 200 °F')
  })

  it('is a picture with words where it says something, and hidden where it decorates', async () => {
    const said = await mountSuspended(GradeLine, { props: { marks, label: 'A road climbs.' } })
    expect(said.attributes()).toMatchObject({ role: 'img', 'aria-label': 'A road climbs.' })
    const decoration = await mountSuspended(GradeLine)
    expect(decoration.attributes('aria-hidden')).toBe('true')
  })
})
