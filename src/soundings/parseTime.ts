/**
 * Seconds since 1970 UTC of a date and time as ISO 8601 writes it, the T or a blank between them;
 * `zoned` tells whether a zone was given, UTC where not. Null for anything else.
 */
export function parseTime(text: string): { seconds: number; zoned: boolean } | null {
  const match =
    /^(\d{4}-\d{2}-\d{2})[T ](\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?) ?(Z|UTC|[+-]\d{2}:?\d{2})?$/i.exec(
      text,
    )
  if (!match) return null
  const [, day, clock] = match
  const zone = match.at(3)
  const offset =
    zone === undefined || /^(z|utc)$/i.test(zone) ? 'Z' : zone.replace(/^(...)(..)$/, '$1:$2')
  const milliseconds = Date.parse(`${day}T${clock}${offset}`)
  if (Number.isNaN(milliseconds)) return null
  // Date.parse rolls 31 February over into March.
  const check = new Date(`${day}T00:00:00Z`).toISOString()
  if (!check.startsWith(day)) return null
  return { seconds: milliseconds / 1000, zoned: zone !== undefined }
}
