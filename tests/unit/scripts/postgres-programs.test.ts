import { mkdirSync, mkdtempSync, realpathSync, rmSync, symlinkSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { listProgramFolders, parseMajor, pickVersion } from '../../../scripts/lib/postgres-programs.mjs'
import { parsePasswd } from '../../../scripts/lib/users.mjs'

describe('the search for the server programs', () => {
  let base: string
  const install = (folder: string, names = ['initdb', 'pg_ctl', 'postgres']) => {
    mkdirSync(join(base, folder), { recursive: true })
    for (const name of names) writeFileSync(join(base, folder, name), '')
    return join(base, folder)
  }

  beforeEach(() => (base = realpathSync(mkdtempSync(join(tmpdir(), 'longpull-programs-')))))
  afterEach(() => rmSync(base, { recursive: true }))

  it('looks where Debian puts them and on the search path, each folder once', () => {
    const debian = install('postgresql/15/bin')
    const other = install('opt/bin')
    install('postgresql/14/bin', ['psql'])
    const links = join(base, 'links')
    mkdirSync(links)
    for (const name of ['initdb', 'pg_ctl', 'postgres']) symlinkSync(join(other, name), join(links, name))
    const found = listProgramFolders({
      debianFolder: join(base, 'postgresql'),
      path: `${links}:${other}:relative`,
    })
    expect(found).toEqual([debian, other])
  })

  it('finds nothing where there is nothing', () => {
    expect(listProgramFolders({ debianFolder: join(base, 'none'), path: '' })).toEqual([])
  })

  it('reads the version', () => {
    expect(parseMajor('postgres (PostgreSQL) 15.18 (Debian 15.18-0+deb12u1)')).toBe(15)
    expect(parseMajor('postgres (PostgreSQL) 17beta1')).toBe(17)
    expect(parseMajor('nothing of the kind')).toBeUndefined()
  })

  it('picks the version that made the data, else the newest that will do', () => {
    const found = [{ major: 14 }, { major: 15 }, { major: 17 }]
    expect(pickVersion(found, undefined)).toEqual({ major: 17 })
    expect(pickVersion(found, 15)).toEqual({ major: 15 })
    expect(pickVersion(found, 16)).toBeUndefined()
    expect(pickVersion([{ major: 14 }], undefined)).toBeUndefined()
  })
})

describe('the user who runs the server', () => {
  it('is found by name', () => {
    const passwd =
      'root:x:0:0:root:/root:/bin/bash\npostgres:x:101:104:Administrator,,,:/var/lib/postgresql:/bin/bash\n'
    expect(parsePasswd(passwd, 'postgres')).toEqual({
      name: 'postgres',
      uid: 101,
      gid: 104,
      home: '/var/lib/postgresql',
    })
    expect(parsePasswd(passwd, 'nobody')).toBeUndefined()
  })
})
