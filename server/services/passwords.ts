import { Scrypt } from '@adonisjs/hash/drivers/scrypt'
import { randomBytes } from 'node:crypto'

/**
 * Password hashing by scrypt at N = 2^15, r = 8, p = 3: one of the equivalent settings of the OWASP Password Storage
 * Cheat Sheet. Costs 32 MiB and about a quarter of a second, which is why signing in goes through a gate.
 */
const SCRYPT = { cost: 2 ** 15, blockSize: 8, parallelization: 3, maxMemory: 64 * 1024 * 1024 } as const

const scrypt = new Scrypt(SCRYPT)

const base64 = (bytes: Buffer): string => bytes.toString('base64').replaceAll('=', '')

/** A hash that no password fits, checked where nobody has the e-mail address, so that both cases cost the same. */
const NOBODYS_HASH = [
  '',
  'scrypt',
  `n=${SCRYPT.cost},r=${SCRYPT.blockSize},p=${SCRYPT.parallelization}`,
  base64(randomBytes(16)),
  base64(randomBytes(64)),
].join('$')

/** @returns the PHC string to store */
export function hashPassword(password: string): Promise<string> {
  return scrypt.make(password)
}

/** Whether the password fits; with no hash it never does, after as long a time. */
export function verifyPassword(storedHash: string | undefined, password: string): Promise<boolean> {
  return scrypt.verify(storedHash ?? NOBODYS_HASH, password)
}

/** Whether a hash was made with other settings than today's. */
export function needsRehash(storedHash: string): boolean {
  return scrypt.needsReHash(storedHash)
}
