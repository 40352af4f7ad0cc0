/** Whether this is a zone that days can be reckoned in, as 'Europe/Vienna'. */
export function isZone(name: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: name })
    return name.includes('/') || name === 'UTC'
  } catch {
    return false
  }
}
