import { defineStore } from 'pinia'
import { useApi } from '~/composables/use-api'
import { ApiError } from '~/utils/api-error'
import { isAllowed } from '#shared/permissions'
import type { Action } from '#shared/permissions'
import type { Me, MeUpdate, SignIn } from '#shared/schemas/auth'
import type { UnitSystem } from '#shared/units/display'

const ONE_YEAR_S = 31_536_000

/** Who is signed in, in which shop and as what; signing in and out; and what is remembered with the person. */
export const useSessionStore = defineStore('session', () => {
  const me = ref<Me | null>(null)
  /** Whether the page asks for a sign-in because the session ended under it. */
  const asking = ref(false)
  /** Whether the last attempt to find out who is signed in failed, so that nobody knows. */
  const unreachable = ref(false)
  const colorMode = useColorMode()
  /** The units this device last showed; the server reads the cookie too, so that the first paint is in the right ones. */
  const unitsChoice = useCookie<UnitSystem | null>('longpull-units', {
    default: () => null,
    maxAge: ONE_YEAR_S,
    sameSite: 'lax',
    decode: (value) => (value === 'us' || value === 'metric' ? value : null),
    encode: (value) => value ?? '',
  })
  const api = useApi()

  const waiting: ((signedIn: boolean) => void)[] = []

  /** Finds out who is signed in; nobody is an answer too. */
  async function load(): Promise<void> {
    try {
      me.value = await api<Me>('/api/auth/me', { anonymous: true })
      unreachable.value = false
    } catch (error) {
      me.value = null
      unreachable.value = !(error instanceof ApiError && error.status === 401)
    }
  }

  /** Whether the person's role includes an action, for showing what can be done. The server decides by the same table. */
  const may = (action: Action): boolean => me.value !== null && isAllowed(me.value.role, action)

  /** Signs in, and brings the person's units and theme along. Throws an ApiError when it cannot. */
  async function signIn(credentials: SignIn): Promise<void> {
    const answer = await api<Me>('/api/auth/sign-in', { method: 'POST', body: credentials, anonymous: true })
    me.value = answer
    unreachable.value = false
    unitsChoice.value = answer.user.unitSystem ?? answer.shop.unitSystem
    colorMode.preference = answer.user.theme
    settle(true)
  }

  /** Signs out here and on the server. When the server cannot be reached it says so and stays signed in. */
  async function signOut(): Promise<void> {
    await api('/api/auth/sign-out', { method: 'POST', anonymous: true })
    me.value = null
  }

  /**
   * Keeps a choice with the person. Where nobody is signed in, the device's cookie has it already. The screen changes at
   * once; a server that cannot be reached only means that other devices do not hear of it.
   */
  async function remember(choice: MeUpdate): Promise<void> {
    if (!me.value) return
    me.value = { ...me.value, user: { ...me.value.user, ...choice } }
    try {
      await api<Me>('/api/auth/me', { method: 'PATCH', body: choice, anonymous: true })
    } catch (error) {
      if (!(error instanceof ApiError)) throw error
    }
  }

  /** Asks for a sign-in over the page. @returns whether somebody signed in */
  function askForSignIn(): Promise<boolean> {
    asking.value = true
    return new Promise((resolve) => waiting.push(resolve))
  }

  /** Ends the asking, either way. */
  function settle(signedIn: boolean): void {
    asking.value = false
    for (const resolve of waiting.splice(0)) resolve(signedIn)
  }

  return { me, asking, unreachable, unitsChoice, may, load, signIn, signOut, remember, askForSignIn, settle }
})
