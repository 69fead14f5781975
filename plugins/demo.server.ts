/** Whether this is a demonstration, read when the server runs, not when it was built; the page gets it with its state. */
export default defineNuxtPlugin(() => {
  useState('demo', () => process.env.LONGPULL_DEMO === '1')
})
