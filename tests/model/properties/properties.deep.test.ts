/**
 * The same properties on ten times as many drawn trucks. PROPERTY_SEED asks for others; a failure prints the seed and
 * path that bring it back.
 */
process.env['PROPERTY_RUNS'] ??= '10'

await import('./answers.test')
await import('./drive.test')
await import('./equilibrium.test')
await import('./invalid-input.test')
await import('./ratings-and-sizing.test')
await import('./time.test')
await import('./trends.test')

export {}
