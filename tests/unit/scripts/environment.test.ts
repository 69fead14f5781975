import { describe, expect, it } from 'vitest'
import {
  explainPortProblem,
  hostsToProbe,
  hostToAsk,
  readSettings,
} from '../../../scripts/lib/environment.mjs'

describe('the settings of the start command', () => {
  it('has defaults that need nothing set', () => {
    expect(readSettings({})).toEqual({
      port: 3000,
      host: '127.0.0.1',
      demo: true,
      ownDatabase: true,
      publicUrl: 'http://localhost:3000',
    })
  })

  it('takes what is set', () => {
    const env = { PORT: '8080', HOST: '0.0.0.0', PUBLIC_URL: 'https://shop.example.test' }
    expect(readSettings(env)).toMatchObject({
      port: 8080,
      host: '0.0.0.0',
      publicUrl: 'https://shop.example.test',
    })
  })

  it('starts no database when one is named, and asks for the address of its owner', () => {
    const env = { DATABASE_URL: 'postgres://a@127.0.0.1/x', DATABASE_OWNER_URL: 'postgres://b@127.0.0.1/x' }
    expect(readSettings(env).ownDatabase).toBe(false)
    expect(() => readSettings({ DATABASE_URL: env.DATABASE_URL })).toThrow(/DATABASE_OWNER_URL is missing/)
  })

  it('makes no secret up outside the demo', () => {
    expect(() => readSettings({ LONGPULL_DEMO: '0' })).toThrow(/NUXT_SESSION_PASSWORD/)
    const env = { LONGPULL_DEMO: '0', NUXT_SESSION_PASSWORD: 'x'.repeat(32) }
    expect(readSettings(env).demo).toBe(false)
  })

  it('says what to set when the port will not do', () => {
    expect(() => readSettings({ PORT: 'three' })).toThrow(/PORT is "three"/)
    expect(explainPortProblem('EADDRINUSE', 3000)).toMatch(/Port 3000 is taken.*PORT=3001 npm start/)
    expect(explainPortProblem('EADDRINUSE', 65_535)).toMatch(/PORT=3000 npm start/)
    expect(explainPortProblem('EACCES', 80)).toMatch(/above 1023/)
    expect(explainPortProblem('EADDRNOTAVAIL', 80)).toMatch(/EADDRNOTAVAIL/)
  })

  it('looks at both loopback addresses, and asks where it can be reached from here', () => {
    expect(hostsToProbe('127.0.0.1')).toEqual(['127.0.0.1', '::1'])
    expect(hostsToProbe('0.0.0.0')).toEqual(['0.0.0.0'])
    expect(hostToAsk('0.0.0.0')).toBe('127.0.0.1')
    expect(hostToAsk('::')).toBe('::1')
    expect(hostToAsk('192.0.2.1')).toBe('192.0.2.1')
  })
})
