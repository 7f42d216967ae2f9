/** A time as it is told on the page: "5 Dec 2026, 09:00 UTC". */
export function utc(iso: string): string {
  const text = new Date(iso).toLocaleString('en-GB', {
    timeZone: 'UTC',
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
  })
  return `${text} UTC`
}

/** The same moment on the clock of whoever looks: "10:00 local time". */
export function localClock(iso: string): string {
  const text = new Date(iso).toLocaleTimeString('en-GB', { hour: '2-digit', minute: '2-digit' })
  return `${text} local time`
}
