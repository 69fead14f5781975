// @ts-check
/**
 * Loaded ahead of a program (`node --import`) whose parent must not leave it behind: when the parent is gone, however
 * it went, the channel between them closes and the program is asked to end, then made to.
 */
// For this program alone: its own children have other channels, to other ends.
if (process.env.NODE_OPTIONS !== undefined) {
  process.env.NODE_OPTIONS = process.env.NODE_OPTIONS.replace(`--import=${import.meta.url}`, '').trim()
}
if (process.channel !== undefined && process.channel !== null) {
  process.on('disconnect', () => {
    setTimeout(() => process.kill(process.pid, 'SIGKILL'), 15_000).unref()
    process.kill(process.pid, 'SIGTERM')
  })
  // The listener above would keep the program alive for the channel's sake alone.
  process.channel.unref()
}
