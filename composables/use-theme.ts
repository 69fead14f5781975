import type { Theme } from '#shared/schemas/common'
import { useSessionStore } from '~/stores/session'

/** Light, dark or as the system has it; remembered on this device, and with the person when signed in. */
export function useTheme() {
  const colorMode = useColorMode()
  const session = useSessionStore()

  const theme = computed<Theme>(() => {
    const preference = colorMode.preference
    return preference === 'light' || preference === 'dark' ? preference : 'system'
  })

  async function setTheme(next: Theme): Promise<void> {
    colorMode.preference = next
    await session.remember({ theme: next })
  }

  return { theme, setTheme }
}
