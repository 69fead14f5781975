// @ts-check
import { Advice } from './packages.mjs'
import { parsePort } from './ports.mjs'

/**
 * What the start command makes of the environment it is given.
 *
 * @param {NodeJS.ProcessEnv} env
 */
export function readSettings(env) {
  const port = readPort(env.PORT)
  const host = env.HOST?.trim() || '127.0.0.1'
  const demo = env.LONGPULL_DEMO !== '0'
  const ownDatabase = env.DATABASE_URL === undefined || env.DATABASE_URL === ''
  if (!ownDatabase && (env.DATABASE_OWNER_URL ?? '') === '') {
    throw new Advice(
      'DATABASE_URL is set, so no database is started here, but DATABASE_OWNER_URL is missing: the tables are made and changed by the role that owns them. Set it to the same database with the role longpull_owner, or unset DATABASE_URL.',
    )
  }
  if (!demo && (env.NUXT_SESSION_PASSWORD ?? '').length < 32) {
    throw new Advice(
      'LONGPULL_DEMO is 0, so no secret is made up: set NUXT_SESSION_PASSWORD to a random text of at least 32 characters (openssl rand -base64 36 prints one) and keep it.',
    )
  }
  return { port, host, demo, ownDatabase, publicUrl: env.PUBLIC_URL || `http://localhost:${port}` }
}

/** @param {string | undefined} text */
function readPort(text) {
  try {
    return parsePort(text, 3000)
  } catch (error) {
    throw new Advice(/** @type {Error} */ (error).message)
  }
}

/**
 * The hosts whose port has to be free: beside the one listened on also the other loopback address, since a browser sent
 * to `localhost` may try that first and would find the other program there.
 *
 * @param {string} host
 */
export function hostsToProbe(host) {
  return host === '127.0.0.1' || host === 'localhost' ? ['127.0.0.1', '::1'] : [host]
}

/**
 * Where the application is asked from this machine.
 *
 * @param {string} host
 */
export function hostToAsk(host) {
  if (host === '0.0.0.0') return '127.0.0.1'
  return host === '::' ? '::1' : host
}

/**
 * @param {string | undefined} code
 * @param {number} port
 */
export function explainPortProblem(code, port) {
  if (code === 'EADDRINUSE') {
    return `Port ${port} is taken by another program. Set PORT to a free one, for example: PORT=${port === 65_535 ? 3000 : port + 1} npm start`
  }
  if (code === 'EACCES') {
    return `Port ${port} is reserved for root. Set PORT to one above 1023, for example: PORT=3000 npm start`
  }
  return `Port ${port} can't be listened on (${code}). Set PORT and HOST to what this machine offers, for example: PORT=3000 HOST=127.0.0.1 npm start`
}
