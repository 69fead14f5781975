/**
 * Every call there is, by address and method; a test holds it to the routes of the build. It tells an address that does
 * not exist (404) from one that does not take a method (405).
 */
export const API_ROUTES: Record<string, readonly string[]> = {
  '/api/_auth/session': ['GET'],
  '/api/_nuxt_icon/:collection': ['GET'],
  '/api/auth/me': ['GET', 'PATCH'],
  '/api/auth/sign-in': ['POST'],
  '/api/auth/sign-out': ['POST'],
  '/api/builds': ['GET', 'POST'],
  '/api/builds/:id': ['DELETE', 'GET', 'PATCH'],
  '/api/builds/:id/scenarios': ['POST'],
  '/api/builds/:id/scenarios/:scenarioId': ['DELETE', 'GET', 'PATCH'],
  '/api/builds/:id/scenarios/:scenarioId/results': ['GET', 'POST'],
  '/api/builds/:id/setups': ['POST'],
  '/api/builds/:id/setups/:setupId': ['DELETE', 'PATCH'],
  '/api/coolers': ['GET'],
  '/api/estimate': ['POST'],
  '/api/estimate/replay': ['POST'],
  '/api/estimate/sizing': ['POST'],
  '/api/estimate/sweep': ['POST'],
  '/api/health': ['GET'],
  '/livez': ['GET'],
  '/readyz': ['GET'],
}

const PATTERNS = Object.entries(API_ROUTES).map(([route, methods]) => ({
  pattern: new RegExp(`^${route.replace(/:[A-Za-z]+/g, '[^/]+')}/?$`),
  methods,
}))

/** The methods an address takes; undefined where there is no such address. */
export function findMethods(path: string): readonly string[] | undefined {
  return PATTERNS.find(({ pattern }) => pattern.test(path))?.methods
}
