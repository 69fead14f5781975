import { useSessionStore } from '~/stores/session'

/** `/` goes to the search of the page, or to that of the builds where the page has none; never while somebody types. */
export function useSearchKey() {
  const session = useSessionStore()
  const nuxtApp = useNuxtApp()

  async function onKey(event: KeyboardEvent) {
    if (event.key !== '/' || event.ctrlKey || event.metaKey || event.altKey || event.defaultPrevented) return
    const from = event.target
    if (from instanceof HTMLElement && (from.isContentEditable || from.matches('input, textarea, select')))
      return
    if (document.querySelector('dialog[open]')) return
    event.preventDefault()
    const here = document.querySelector<HTMLElement>('main input[type="search"]')
    if (here) return here.focus()
    if (!session.may('build.read')) return
    // The page is there only when what it loads is.
    nuxtApp.hooks.hookOnce('page:finish', async () => {
      await nextTick()
      document.querySelector<HTMLElement>('main input[type="search"]')?.focus()
    })
    await navigateTo('/builds')
  }

  onMounted(() => document.addEventListener('keydown', onKey))
  onBeforeUnmount(() => document.removeEventListener('keydown', onKey))
}
