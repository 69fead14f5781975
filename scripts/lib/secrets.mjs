// @ts-check
import { createHmac, createHash, pbkdf2Sync, randomBytes } from 'node:crypto'
import { chmodSync, existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'

/**
 * @typedef {{ admin: string, owner: string, app: string, backup: string, session: string }} Secrets
 * @returns {Secrets} made-up passwords: 192 random bits each, in letters that need no escaping in an address
 */
export function makeSecrets() {
  const make = () => randomBytes(24).toString('base64url')
  return {
    admin: make(),
    owner: make(),
    app: make(),
    backup: make(),
    session: randomBytes(36).toString('base64url'),
  }
}

/**
 * The made-up passwords of this checkout, readable by its owner alone; made at the first call.
 *
 * @param {string} file
 * @returns {Secrets}
 */
export function loadSecrets(file) {
  const made = makeSecrets()
  if (existsSync(file)) {
    const kept = parseSecrets(readFileSync(file, 'utf8'))
    if (Object.keys(made).every((name) => name in kept)) return { ...made, ...kept }
    Object.assign(made, kept)
  }
  writePrivate(file, `${JSON.stringify(made, null, 2)}\n`)
  return made
}

/**
 * @param {string} text
 * @returns {Partial<Secrets>} what can be read of it; a file cut short gives nothing, and new passwords are set
 */
function parseSecrets(text) {
  try {
    const value = JSON.parse(text)
    return typeof value === 'object' && value !== null ? value : {}
  } catch {
    return {}
  }
}

/**
 * Writes a file that only its owner may read, whole or not at all.
 *
 * @param {string} file
 * @param {string} text
 */
export function writePrivate(file, text) {
  mkdirSync(dirname(file), { recursive: true })
  const draft = `${file}.${process.pid}.new`
  writeFileSync(draft, text, { mode: 0o600 })
  chmodSync(draft, 0o600)
  renameSync(draft, file)
}

/**
 * What PostgreSQL stores for a password (RFC 5802 and RFC 7677, SCRAM-SHA-256), worked out here so that the password
 * itself is in no statement, and so in no log of the server.
 *
 * @param {string} password ASCII, so that the preparation of RFC 4013 changes nothing
 * @param {Buffer} [salt]
 * @param {number} [iterations]
 */
export function scramVerifier(password, salt = randomBytes(16), iterations = 4096) {
  const salted = pbkdf2Sync(password, salt, iterations, 32, 'sha256')
  const clientKey = createHmac('sha256', salted).update('Client Key').digest()
  const storedKey = createHash('sha256').update(clientKey).digest('base64')
  const serverKey = createHmac('sha256', salted).update('Server Key').digest('base64')
  return `SCRAM-SHA-256$${iterations}:${salt.toString('base64')}$${storedKey}:${serverKey}`
}
