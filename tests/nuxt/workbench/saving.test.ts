import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { defineComponent, h, ref, type Ref } from 'vue'
import { useAutosave, type SavedResource } from '~/composables/workbench/use-autosave'
import { useKeptTyping } from '~/composables/workbench/use-kept-typing'
import { ApiError } from '~/utils/api-error'

interface Thing {
  name: string
  weight: number
}
const failure = (status: number, code: ApiError['code'] = 'unreachable') =>
  new ApiError({ status, code, message: 'It did not work.' })

/** A component around the saving, so that it has a life to live. */
async function startSaving(resource: Partial<SavedResource<Thing>> & Pick<SavedResource<Thing>, 'push'>) {
  let saving: ReturnType<typeof useAutosave<Thing>> | undefined
  const wrapper = await mountSuspended(
    defineComponent({
      setup() {
        saving = useAutosave<Thing>({
          initial: { name: 'Red truck', weight: 5000 },
          version: 1,
          pull: () => Promise.resolve({ value: { name: 'Blue truck', weight: 6000 }, version: 7 }),
          ...resource,
        })
        return () => h('p', saving?.state.value)
      },
    }),
  )
  if (!saving) throw new Error('nothing was set up')
  return { saving, wrapper }
}

describe('saving as you go', () => {
  beforeEach(() => {
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] })
  })
  afterEach(() => {
    vi.useRealTimers()
  })

  it('waits for the typing to rest, then sends only what changed, under the version it was read at', async () => {
    const push = vi.fn(() => Promise.resolve(2))
    const { saving } = await startSaving({ push })
    saving.change({ weight: 5100 })
    saving.change({ weight: 5200 })
    expect(saving.state.value).toBe('waiting')
    await vi.advanceTimersByTimeAsync(700)
    expect(push).not.toHaveBeenCalled()
    await vi.advanceTimersByTimeAsync(200)
    expect(push.mock.calls).toEqual([[{ weight: 5200 }, 1]])
    expect(saving.state.value).toBe('saved')
    saving.change({ name: 'Old truck' })
    await vi.advanceTimersByTimeAsync(900)
    expect(push.mock.calls[1]).toEqual([{ name: 'Old truck' }, 2])
  })

  it('keeps what is typed while a save is on its way, and sends it after', async () => {
    const answers: ((version: number) => void)[] = []
    const push = vi.fn(
      (_changes: Partial<Thing>, _version: number) => new Promise<number>((resolve) => answers.push(resolve)),
    )
    const { saving } = await startSaving({ push })
    saving.change({ weight: 5100 })
    await vi.advanceTimersByTimeAsync(900)
    expect(saving.state.value).toBe('saving')
    saving.change({ weight: 5300 })
    answers[0]?.(2)
    await vi.advanceTimersByTimeAsync(900)
    expect(push.mock.calls).toEqual([
      [{ weight: 5100 }, 1],
      [{ weight: 5300 }, 2],
    ])
    answers[1]?.(3)
    await vi.advanceTimersByTimeAsync(10)
    expect(saving.state.value).toBe('saved')
    expect(saving.value.value.weight).toBe(5300)
  })

  it('keeps the typing while the server cannot be reached, and tries again by itself', async () => {
    const push = vi
      .fn()
      .mockRejectedValueOnce(failure(0))
      .mockRejectedValueOnce(failure(503))
      .mockResolvedValue(2)
    const { saving } = await startSaving({ push })
    saving.change({ weight: 5100 })
    await vi.advanceTimersByTimeAsync(900)
    expect(saving.state.value).toBe('offline')
    expect(saving.value.value.weight).toBe(5100)
    await vi.advanceTimersByTimeAsync(2100)
    expect(saving.state.value).toBe('offline')
    await vi.advanceTimersByTimeAsync(5100)
    expect(saving.state.value).toBe('saved')
    expect(push).toHaveBeenCalledTimes(3)
  })

  it('says what the server refuses, and does not ask again until something changes', async () => {
    const refusal = new ApiError({
      status: 400,
      code: 'bad_input',
      message: 'Some fields need another value.',
      issues: [{ path: 'weight', message: 'must be at most 100,000 kg' }],
    })
    const push = vi.fn().mockRejectedValueOnce(refusal).mockResolvedValue(2)
    const { saving } = await startSaving({ push })
    saving.change({ weight: 1e9 })
    await vi.advanceTimersByTimeAsync(60_000)
    expect(push).toHaveBeenCalledTimes(1)
    expect(saving.state.value).toBe('refused')
    expect(saving.problem.value).toBe('weight: must be at most 100,000 kg')
    saving.change({ weight: 5000.5 })
    await vi.advanceTimersByTimeAsync(900)
    expect(saving.state.value).toBe('saved')
  })

  it('overwrites nothing of somebody else unasked; mine then goes over theirs field by field (R5)', async () => {
    const push = vi.fn().mockRejectedValueOnce(failure(412, 'stale_version')).mockResolvedValue(8)
    const { saving } = await startSaving({ push })
    saving.change({ weight: 5100 })
    await vi.advanceTimersByTimeAsync(900)
    expect(saving.state.value).toBe('stale')
    saving.change({ weight: 5200 })
    await vi.advanceTimersByTimeAsync(60_000)
    expect(push).toHaveBeenCalledTimes(1)
    await saving.keepMine()
    expect(push.mock.calls[1]).toEqual([{ weight: 5200 }, 7])
    expect(saving.value.value).toEqual({ name: 'Blue truck', weight: 5200 })
    expect(saving.state.value).toBe('saved')
  })

  it('takes theirs when asked to, and sends nothing', async () => {
    const push = vi.fn().mockRejectedValueOnce(failure(412, 'stale_version'))
    const { saving } = await startSaving({ push })
    saving.change({ weight: 5100 })
    await vi.advanceTimersByTimeAsync(900)
    await saving.takeTheirs()
    await vi.advanceTimersByTimeAsync(5000)
    expect(saving.value.value).toEqual({ name: 'Blue truck', weight: 6000 })
    expect(saving.state.value).toBe('saved')
    expect(push).toHaveBeenCalledTimes(1)
  })
})

describe('keeping typing on the device', () => {
  const KEY = 'longpull:typing:test'
  beforeEach(() => localStorage.clear())

  async function keep(options: { open: Ref<boolean>; typed: Ref<string>; restore?: (kept: string) => void }) {
    return mountSuspended(
      defineComponent({
        setup() {
          useKeptTyping<string>({
            key: KEY,
            read: () => options.typed.value,
            isOpen: () => options.open.value,
            restore: options.restore ?? (() => undefined),
            when: () => [options.open.value, options.typed.value],
          })
          return () => h('p')
        },
      }),
    )
  }

  it('keeps what is not saved, gives it back when the page is opened again, and forgets it once it is saved', async () => {
    const open = ref(false)
    const typed = ref('')
    const page = await keep({ open, typed })
    open.value = true
    typed.value = '5,400 lb'
    await vi.waitFor(() => expect(localStorage.getItem(KEY)).toBe('"5,400 lb"'))
    page.unmount()
    const restore = vi.fn()
    const again = await keep({ open, typed, restore })
    expect(restore).toHaveBeenCalledWith('5,400 lb')
    open.value = false
    await vi.waitFor(() => expect(localStorage.getItem(KEY)).toBeNull())
    again.unmount()
  })

  it('is not upset by what others have left in its place', async () => {
    localStorage.setItem(KEY, '{ not json')
    const restore = vi.fn()
    await keep({ open: ref(false), typed: ref(''), restore })
    expect(restore).not.toHaveBeenCalled()
  })
})
