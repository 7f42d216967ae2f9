import { createHash } from 'node:crypto'
import { type FieldAir, type FieldLevel } from '../fields/fieldAir.ts'
import { geometricAltitude, wrapLongitude } from '../physics/earth.ts'
import { flyAlongPath, type FlightPlan } from '../physics/flight.ts'
import { type Whereabouts } from '../physics/path.ts'
import { TrackRecorder } from '../physics/track.ts'
import { type AirRecipe } from './airRecipe.ts'
import { type FieldSource } from './airSource.ts'

/** Rounds in which a level and the place where the flight meets it find each other. */
const ROUNDS = 4

/**
 * The air that a plan's own flight meets in a forecast, as two columns: one on the way up, one on the way
 * down. Flights that hardly differ from it may be flown in these, which is much faster.
 * @throws NotFlyable; OutsideField where the flight leaves a forecast that is to be refused beyond
 */
export function columnsAlong(plan: FlightPlan, { id, field, holding }: FieldSource): AirRecipe {
  const recorder = new TrackRecorder()
  flyAlongPath(plan, field, recorder)
  const track = recorder.track()
  const burst = track.findIndex(({ phase }) => phase === 'burst')
  const { time } = plan.launch
  return {
    kind: 'legs',
    ascent: leg(id, holding, track.slice(0, burst + 1), time),
    descent: leg(id, holding, track.slice(burst).reverse(), time),
  }
}

/** The air of a forecast over a site at a time, s since 1970 UTC, beyond its grid and times the nearest. */
export function columnOver(site: FlightPlan['launch'], { id, holding }: FieldSource): AirRecipe {
  const levels = holding.column(site.latitude, site.longitude, site.time)
  return recipe(id, levels)
}

/** `track` from the ground up, released at `time`, s since 1970 UTC. */
function leg(id: string, air: FieldAir, track: readonly Whereabouts[], time: number): AirRecipe {
  let at = track[0]
  const levels = air.file.header.levels.map((_, index) => {
    let level: FieldLevel
    let rounds = 0
    do {
      level = air.column(at.latitude, at.longitude, time + at.elapsed)[index]
      at = placeAt(track, geometricAltitude(level.geopotentialHeight))
    } while (++rounds < ROUNDS)
    return level
  })
  return recipe(id, levels)
}

function recipe(id: string, levels: readonly FieldLevel[]): AirRecipe {
  const digest = createHash('sha256').update(JSON.stringify(levels)).digest('base64url')
  return { kind: 'profile', id: `${id} ${digest}`, levels }
}

/** Where a track that ascends from point to point is at an altitude, m; its nearest end beyond them. */
function placeAt(track: readonly Whereabouts[], altitude: number): Whereabouts {
  const next = track.findIndex((point) => point.altitude > altitude)
  if (next <= 0) return track[next === 0 ? 0 : track.length - 1]
  const [from, to] = [track[next - 1], track[next]]
  const share = (altitude - from.altitude) / (to.altitude - from.altitude)
  const eastward = wrapLongitude(to.longitude - from.longitude)
  return {
    latitude: from.latitude + (to.latitude - from.latitude) * share,
    longitude: wrapLongitude(from.longitude + eastward * share),
    altitude,
    elapsed: from.elapsed + (to.elapsed - from.elapsed) * share,
  }
}
