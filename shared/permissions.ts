import type { Role } from './schemas/auth'

const EVERYONE = ['owner', 'estimator', 'technician', 'customer'] as const
const SHOP = ['owner', 'estimator', 'technician'] as const
const DESK = ['owner', 'estimator'] as const

/**
 * Who may do what: the one table, for the server, which decides, and for screens, which show what is allowed. Each action
 * lists the roles it is open to.
 */
export const PERMISSIONS = {
  'profile.read': EVERYONE,
  'profile.update': EVERYONE,
  'estimate.run': EVERYONE,
  'build.read': SHOP,
  'build.create': DESK,
  'build.update': DESK,
  'build.delete': DESK,
  'scenario.read': SHOP,
  'scenario.create': DESK,
  'scenario.update': DESK,
  'scenario.delete': DESK,
  'setup.create': DESK,
  'setup.update': DESK,
  'setup.delete': DESK,
  'result.read': SHOP,
  'result.create': DESK,
  'cooler.read': SHOP,
} as const satisfies Record<string, readonly Role[]>

export type Action = keyof typeof PERMISSIONS

/** Whether a role includes an action. */
export function isAllowed(role: Role, action: Action): boolean {
  return (PERMISSIONS[action] as readonly Role[]).includes(role)
}
