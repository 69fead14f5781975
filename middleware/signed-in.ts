import { useSessionStore } from '~/stores/session'

/** For pages of a shop: whoever is not signed in is asked to, and comes back to the address they wanted. */
export default defineNuxtRouteMiddleware((to) => {
  const session = useSessionStore()
  if (session.me) return
  if (session.unreachable)
    return abortNavigation(
      createError({ status: 503, statusText: 'The session cannot be checked right now.' }),
    )
  return navigateTo({ path: '/sign-in', query: { returnTo: to.fullPath } })
})
