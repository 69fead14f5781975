/**
 * Where to go after signing in: the address one came from, as long as it is a page of this program. Anything else (another
 * site, a scheme, a path that a browser reads as a host) becomes the list of builds.
 */
export function safeReturnAddress(wanted: unknown): string {
  const fallback = '/builds'
  if (typeof wanted !== 'string' || !/^\/(?![/\\])/.test(wanted)) return fallback
  const base = 'http://longpull.invalid'
  if (!URL.canParse(wanted, base)) return fallback
  const url = new URL(wanted, base)
  if (url.origin !== base || url.pathname === '/sign-in') return fallback
  return url.pathname + url.search + url.hash
}
