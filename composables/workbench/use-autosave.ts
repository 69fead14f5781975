import { ApiError } from '~/utils/api-error'

/** How long typing may rest before it is saved. */
const SAVE_AFTER_MS = 800
/** Waits between tries while the server cannot be reached. */
const RETRY_MS = [2000, 5000, 10_000, 30_000] as const

/**
 * What the line beside the title says. `saved`: nothing is open. `waiting`, `saving`: on its way. `offline`: kept here, and
 * tried again. `refused`: the server says what is wrong. `stale`: somebody else saved since; nothing is overwritten unasked.
 */
export type SaveState = 'saved' | 'waiting' | 'saving' | 'offline' | 'refused' | 'stale'

/** A thing on the server that is changed field by field under a version. */
export interface SavedResource<T extends object> {
  initial: T
  version: number
  /** Sends changed fields under a version. @returns the new version */
  push: (changes: Partial<T>, version: number) => Promise<number>
  /** Fetches what is there now. */
  pull: () => Promise<{ value: T; version: number }>
}

/**
 * Saves a resource as it is edited: what changed, a moment after the last keystroke, one request at a time, under the
 * version it was read at. Whatever goes wrong, the value here stays as it was typed.
 */
export function useAutosave<T extends object>(resource: SavedResource<T>) {
  const value = shallowRef<T>(resource.initial)
  const state = ref<SaveState>('saved')
  const problem = ref<string>()
  const version = ref(resource.version)
  let saved: T = resource.initial
  let timer: ReturnType<typeof setTimeout> | undefined
  let running: Promise<void> | undefined
  let tries = 0

  function changes(): Partial<T> {
    const keys = (Object.keys(value.value) as (keyof T)[]).filter((key) => value.value[key] !== saved[key])
    return Object.fromEntries(keys.map((key) => [key, value.value[key]])) as Partial<T>
  }
  const isOpen = () => Object.keys(changes()).length > 0

  function change(next: Partial<T>) {
    value.value = { ...value.value, ...next }
    if (state.value !== 'stale') {
      state.value = isOpen() ? 'waiting' : 'saved'
      schedule(SAVE_AFTER_MS)
    }
  }

  function schedule(waitMs: number) {
    clearTimeout(timer)
    timer = setTimeout(() => void flush(), waitMs)
  }

  /** Saves what is open now. Resolves when nothing is left to send, or when sending has to wait. */
  async function flush(): Promise<void> {
    clearTimeout(timer)
    await running
    if (!isOpen() || state.value === 'stale') return
    running = send()
    await running
    running = undefined
    if (state.value === 'waiting') return flush()
  }

  async function send(): Promise<void> {
    const sent = value.value
    state.value = 'saving'
    problem.value = undefined
    try {
      version.value = await resource.push(changes(), version.value)
      saved = sent
      tries = 0
      state.value = isOpen() ? 'waiting' : 'saved'
    } catch (error) {
      if (!(error instanceof ApiError)) throw error
      meet(error)
    }
  }

  function meet(error: ApiError) {
    problem.value = error.issues[0] ? `${error.issues[0].path}: ${error.issues[0].message}` : error.message
    if (error.status === 412) {
      state.value = 'stale'
    } else if (error.status === 0 || error.status === 429 || error.status >= 500) {
      state.value = 'offline'
      schedule(RETRY_MS[Math.min(tries, RETRY_MS.length - 1)] ?? 30_000)
      tries += 1
    } else {
      state.value = 'refused'
    }
  }

  /** After a 412: saves what was typed here over what is there now. */
  async function keepMine(): Promise<void> {
    const current = await resource.pull()
    version.value = current.version
    // Only fields that were changed here are sent; what the other changed elsewhere stays.
    const mine = changes()
    saved = current.value
    value.value = { ...current.value, ...mine }
    state.value = 'waiting'
    await flush()
  }

  /** After a 412: takes what is there now and drops what was typed here. */
  async function takeTheirs(): Promise<void> {
    const current = await resource.pull()
    version.value = current.version
    saved = current.value
    value.value = current.value
    state.value = 'saved'
    problem.value = undefined
  }

  /** Puts typing back that was kept here but never saved, under the version it was typed over. */
  function restore(kept: Partial<T>, keptVersion: number) {
    version.value = keptVersion
    change(kept)
  }

  const retry = () => {
    if (state.value === 'offline') void flush()
  }
  onMounted(() => window.addEventListener('online', retry))
  onScopeDispose(() => {
    clearTimeout(timer)
    if (import.meta.client) window.removeEventListener('online', retry)
  })

  return { value, version, state, problem, change, changes, flush, keepMine, takeTheirs, restore }
}
