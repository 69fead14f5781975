import type { Import } from './sources'

/** What a room of the house may import: other rooms, and packages by pattern. */
interface Room {
  /** Paths that belong to it, from the root; the first room that fits counts. */
  holds: RegExp
  /** Rooms or single files by how their path begins; its own is always allowed. */
  rooms: string[]
  /** As `rooms`, but only for types, which the compiler erases. */
  types?: string[]
  /** Packages; undefined for any but those of the other side. */
  packages?: RegExp
}

const SHARED = 'shared/'
const NOTHING = /^$/
/** Code that runs in the browser: neither Node's modules nor the database nor the server's framework. */
const CLIENT = /^(?!node:|knex$|knex\/|pg$|pg-|h3$|nitropack)/
/** Code that runs on the server: nothing of the pages. */
const SERVER = /^(?!vue$|vue-router$|pinia$|@pinia\/|knex$|knex\/|pg$|pg-)/

/** The table of the house: one line a room. */
export const ROOMS: Record<string, Room> = {
  pages: {
    holds: /^(app\.vue|error\.vue|pages\/|layouts\/|middleware\/)/,
    rooms: ['components/', 'stores/', 'composables/', 'utils/', SHARED],
    packages: CLIENT,
  },
  // The frame around every page knows who is signed in; what it frames does not.
  'components/shell': {
    holds: /^components\/shell\//,
    rooms: ['components/', 'stores/session', 'composables/', 'utils/', SHARED],
    packages: CLIENT,
  },
  components: {
    holds: /^components\//,
    rooms: ['composables/', 'utils/', SHARED],
    packages: CLIENT,
  },
  composables: { holds: /^composables\//, rooms: ['stores/', 'utils/', SHARED], packages: CLIENT },
  stores: { holds: /^stores\//, rooms: ['composables/', 'utils/', SHARED], packages: CLIENT },
  utils: { holds: /^utils\//, rooms: [SHARED], packages: CLIENT },
  workers: { holds: /^workers\//, rooms: ['utils/', SHARED], packages: CLIENT },
  plugins: {
    holds: /^plugins\//,
    rooms: ['stores/', 'composables/', 'utils/', SHARED],
    packages: CLIENT,
  },
  'shared/heat': {
    holds: /^shared\/heat\//,
    rooms: ['shared/units/', 'shared/errors'],
    types: ['shared/schemas/'],
    packages: NOTHING,
  },
  'shared/units': { holds: /^shared\/units\//, rooms: [], packages: NOTHING },
  'shared/schemas': {
    holds: /^shared\/schemas\//,
    rooms: ['shared/units/'],
    types: ['shared/heat/types'],
    packages: /^zod$/,
  },
  'shared/errors': { holds: /^shared\/errors\.ts$/, rooms: [], packages: NOTHING },
  'shared/permissions': {
    holds: /^shared\/permissions\.ts$/,
    rooms: ['shared/schemas/'],
    packages: NOTHING,
  },
  // Units and sums as people type them; loaded at the first keystroke.
  'shared/quantities': {
    holds: /^shared\/quantities\//,
    rooms: ['shared/units/'],
    packages: /^(mathjs|convert-units)$/,
  },
  'shared/charts': { holds: /^shared\/charts\//, rooms: [SHARED], packages: /^d3-(scale|shape)$/ },
  // The other topics: pure, built on the rooms above and on each other.
  'shared/topics': { holds: /^shared\/[a-z-]+\//, rooms: [SHARED], packages: /^zod$/ },
  'server/api': {
    holds: /^server\/(api|routes|middleware)\//,
    // Health is asked of the process and the database, not of a shop.
    rooms: ['server/utils/', 'server/services/', 'server/db/health', SHARED],
    packages: SERVER,
  },
  'server/services': {
    holds: /^server\/services\//,
    rooms: ['server/repositories/', 'server/db/with-shop', SHARED],
    // Types of a transaction, no way to make one.
    types: ['server/db/'],
    packages: SERVER,
  },
  'server/repositories': {
    holds: /^server\/repositories\//,
    rooms: ['server/db/', SHARED],
    packages: SERVER,
  },
  'server/db': { holds: /^server\/db\//, rooms: [SHARED] },
  'server/utils': {
    holds: /^server\/utils\//,
    // The wrapper of every handler opens the shop's transaction and translates what the database refuses.
    rooms: ['server/utils/', 'server/services/', 'server/db/with-shop', 'server/db/failures', SHARED],
    packages: SERVER,
  },
  'server/plugins': {
    holds: /^server\/plugins\//,
    // Closes the connections when the process ends.
    rooms: ['server/utils/', 'server/services/', 'server/db/connection', SHARED],
    packages: SERVER,
  },
  scripts: {
    holds: /^scripts\//,
    // The demo seed stores passwords as signing in expects them.
    rooms: ['server/db/', 'server/repositories/', 'server/services/passwords', SHARED],
  },
  tests: { holds: /^tests\//, rooms: [''] },
  settings: {
    holds: /^[^/]+\.(ts|mjs)$/,
    rooms: ['server/db/config', 'utils/tokens', '.nuxt/', 'package.json'],
  },
}

export function roomOf(path: string): [string, Room] | undefined {
  return Object.entries(ROOMS).find(([, room]) => room.holds.test(path))
}

/** What is wrong with an import, in words; undefined when it is allowed. */
export function judgeImport(path: string, { specifier, target, typeOnly }: Import): string | undefined {
  const found = roomOf(path)
  if (found === undefined) return `${path} lies in no room of the house`
  const [name, room] = found
  if (target === undefined) {
    const isFramework = specifier.startsWith('#')
    const fits = room.packages === undefined || room.packages.test(specifier)
    const erased = typeOnly && room.packages !== NOTHING
    const pureRoom = name.startsWith('shared/')
    if ((fits && !(isFramework && pureRoom)) || erased) return undefined
    return `${path} imports the package ${specifier}, which ${name} may not`
  }
  const own = roomOf(target.includes('.') ? target : `${target}.ts`)?.[0] === name
  const allowed = own || room.rooms.some((prefix) => target.startsWith(prefix))
  const allowedAsType = typeOnly && (room.types ?? []).some((prefix) => target.startsWith(prefix))
  return allowed || allowedAsType ? undefined : `${path} imports ${target}, which ${name} may not`
}
