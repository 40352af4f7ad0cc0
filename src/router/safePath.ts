/** A path of this application from a query, or the start: an address elsewhere is never followed. */
export function safePath(next: unknown): string {
  if (typeof next !== 'string' || !next.startsWith('/')) return '/'
  const url = new URL(next, 'http://here.invalid')
  return url.host === 'here.invalid' ? url.pathname + url.search + url.hash : '/'
}
