import { type Note, type Place } from './profile.ts'

/** Places named in a note about many of them. */
const NAMED_PLACES = 5

interface Alike {
  count: number
  places: Place[]
}

/** Gathers what was done to a sounding; alike notes become one with a count and the first places. */
export class Notes {
  private readonly alike = new Map<string, Alike>()

  /** `message` says what was done to one thing; `place`, where. */
  add(message: string, place?: Place): void {
    let group = this.alike.get(message)
    if (!group) {
      group = { count: 0, places: [] }
      this.alike.set(message, group)
    }
    group.count++
    if (place && group.places.length < NAMED_PLACES) group.places.push(place)
  }

  /** The notes in the order in which each was first made. */
  list(): Note[] {
    return Array.from(this.alike, ([message, { count, places }]) => {
      const first = places.at(0)
      return {
        ...(first && 'line' in first ? { line: first.line } : {}),
        ...(first && 'path' in first ? { path: first.path } : {}),
        message: message + where(count, places),
      }
    })
  }
}

function where(count: number, places: readonly Place[]): string {
  const first = places.at(0)
  if (!first) return count > 1 ? ` (${count} times)` : ''
  const names = places.map((place) =>
    'line' in place ? String(place.line) : 'path' in place ? place.path : place.label,
  )
  const kind = 'line' in first ? (count > 1 ? 'lines ' : 'line ') : ''
  const times = count > 1 ? `${count} times: ` : ''
  const more = count > names.length ? ' …' : ''
  return ` (${times}${kind}${names.join(', ')}${more})`
}
