import { useSessionStore } from '~/stores/session'

/** Finds out once per page who is signed in, so that the first paint knows; visitors without a cookie are nobody. */
export default defineNuxtPlugin({
  name: 'session',
  async setup() {
    if (useRequestHeader('cookie')) await useSessionStore().load()
  },
})
