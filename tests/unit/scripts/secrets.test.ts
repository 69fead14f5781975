import { mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { rolesSql } from '../../../scripts/lib/bootstrap-sql.mjs'
import { loadSecrets, makeSecrets, scramVerifier } from '../../../scripts/lib/secrets.mjs'

describe('the made-up passwords', () => {
  let folder: string
  beforeEach(() => (folder = mkdtempSync(join(tmpdir(), 'longpull-secrets-'))))
  afterEach(() => rmSync(folder, { recursive: true }))

  it('are long, all different, and need no escaping in an address', () => {
    const made = Object.values(makeSecrets())
    expect(new Set(made).size).toBe(made.length)
    for (const secret of made) expect(secret).toMatch(/^[A-Za-z0-9_-]{32,}$/)
  })

  it('are kept for their owner alone, and are the same the next time', () => {
    const file = join(folder, 'deeper', 'secrets.json')
    const first = loadSecrets(file)
    expect(loadSecrets(file)).toEqual(first)
    expect(statSync(file).mode & 0o777).toBe(0o600)
  })

  it('are completed when one is missing, and made anew when the file is broken', () => {
    const file = join(folder, 'secrets.json')
    writeFileSync(file, JSON.stringify({ admin: 'kept' }))
    const completed = loadSecrets(file)
    expect(completed.admin).toBe('kept')
    expect(completed.session.length).toBeGreaterThanOrEqual(32)
    writeFileSync(file, '{"admin": "ke')
    expect(loadSecrets(file).admin).not.toBe('kept')
    expect(JSON.parse(readFileSync(file, 'utf8'))).toHaveProperty('backup')
  })

  it('are in no statement sent to the server', () => {
    const secrets = makeSecrets()
    const sql = rolesSql(secrets)
    for (const secret of Object.values(secrets)) expect(sql).not.toContain(secret)
    expect(sql.match(/SCRAM-SHA-256\$4096:/g)).toHaveLength(3)
  })
})

describe('the stored form of a password', () => {
  // Source: RFC 7677, section 3, the exchange for user "user" and password "pencil": the server's signature over the
  // authentication message. Salt, iterations, nonces and signature as printed there, from memory; a mistake in any of
  // them could not give the printed signature.
  it('gives the signature of the published exchange', async () => {
    const { createHmac } = await import('node:crypto')
    const salt = Buffer.from('W22ZaJ0SNY7soEsUEjb6gQ==', 'base64')
    const serverKey = scramVerifier('pencil', salt, 4096).split(':').at(-1) ?? ''
    const message = [
      'n=user,r=rOprNGfwEbeRWgbNEkqO',
      'r=rOprNGfwEbeRWgbNEkqO%hvYDpWUa2RaTCAfuxFIlj)hNlF$k0,s=W22ZaJ0SNY7soEsUEjb6gQ==,i=4096',
      'c=biws,r=rOprNGfwEbeRWgbNEkqO%hvYDpWUa2RaTCAfuxFIlj)hNlF$k0',
    ].join(',')
    const signature = createHmac('sha256', Buffer.from(serverKey, 'base64')).update(message).digest('base64')
    expect(signature).toBe('6rriTRBi23WpRR/wtup+mMhUZUn/dB5nLTJRsjl95G4=')
  })
})
