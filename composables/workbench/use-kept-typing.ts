const WRITE_AFTER_MS = 300

/**
 * Keeps typing that is not saved yet on this device, so that neither a closed tab nor a dead server loses it, and puts it
 * back when the page is opened again. What is saved is no longer kept.
 */
export function useKeptTyping<Kept>(options: {
  key: string
  read: () => Kept
  isOpen: () => boolean
  restore: (kept: Kept) => void
  /** Changes of this are looked at. */
  when: () => unknown
}) {
  let timer: ReturnType<typeof setTimeout> | undefined
  /** Not at every move of a slider: writing to the disk would hold the page up. */
  const writeSoon = () => {
    clearTimeout(timer)
    timer = setTimeout(write, WRITE_AFTER_MS)
  }
  const write = () => {
    clearTimeout(timer)
    try {
      if (options.isOpen()) localStorage.setItem(options.key, JSON.stringify(options.read()))
      else localStorage.removeItem(options.key)
    } catch {
      // Full or forbidden storage: typing is still on the screen, and the line beside the title says it is not saved.
    }
  }
  const warn = (event: BeforeUnloadEvent) => {
    if (options.isOpen()) event.preventDefault()
  }
  onMounted(() => {
    const kept = readKept<Kept>(options.key)
    if (kept !== undefined) options.restore(kept)
    window.addEventListener('beforeunload', warn)
    window.addEventListener('pagehide', write)
    watch(options.when, writeSoon)
  })
  onBeforeUnmount(() => {
    write()
    window.removeEventListener('beforeunload', warn)
    window.removeEventListener('pagehide', write)
  })
}

function readKept<Kept>(key: string): Kept | undefined {
  try {
    const text = localStorage.getItem(key)
    return text === null ? undefined : (JSON.parse(text) as Kept)
  } catch {
    return undefined
  }
}
