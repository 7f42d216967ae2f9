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

/** The same moment on that clock with its zone, for a sheet that others read: "5 Dec, 10:00 GMT+1". */
export function localWithZone(iso: string): string {
  return new Date(iso).toLocaleString('en-GB', {
    day: 'numeric',
    month: 'short',
    hour: '2-digit',
    minute: '2-digit',
    timeZoneName: 'short',
  })
}
