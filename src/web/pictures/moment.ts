import { type TrackRow } from './shownRun.ts'

const DEGREE = Math.PI / 180

/** The row at `elapsed` s after release, held at release and landing; straight between two rows. */
export function momentAt(track: readonly TrackRow[], elapsed: number): TrackRow {
  const next = firstAfter(track, (row) => row.elapsedS, elapsed)
  if (next === 0) return track[0]
  if (next === track.length) return track[track.length - 1]
  const [from, to] = [track[next - 1], track[next]]
  if (elapsed === from.elapsedS) return from
  const share = (elapsed - from.elapsedS) / (to.elapsedS - from.elapsedS)
  const between = (a: number, b: number) => a + (b - a) * share
  return {
    elapsedS: elapsed,
    time: new Date(between(Date.parse(from.time), Date.parse(to.time))).toISOString(),
    ...placeBetween(from, to, share),
    altitudeM: between(from.altitudeM, to.altitudeM),
    verticalSpeedMs: between(from.verticalSpeedMs, to.verticalSpeedMs),
    ...windBetween(from, to, share),
    phase: from.phase === 'ascent' ? 'ascent' : 'descent',
  }
}

/** When the balloon passes an altitude, m, on its way up: s after release, held at release and burst. */
export function elapsedOnAscent(track: readonly TrackRow[], altitude: number): number {
  const rising = track.slice(0, burstIndex(track) + 1)
  const next = firstAfter(rising, (row) => row.altitudeM, altitude)
  if (next === 0) return track[0].elapsedS
  if (next === rising.length) return rising[rising.length - 1].elapsedS
  const [from, to] = [rising[next - 1], rising[next]]
  const share = (altitude - from.altitudeM) / (to.altitudeM - from.altitudeM)
  return from.elapsedS + (to.elapsedS - from.elapsedS) * share
}

/** Where in a track the balloon bursts. */
export function burstIndex(track: readonly TrackRow[]): number {
  return track.findIndex((row) => row.phase === 'burst')
}

/** Along the chord through the earth, which knows neither poles nor an antimeridian. */
function placeBetween(from: TrackRow, to: TrackRow, share: number) {
  const a = direction(from.latitudeDeg, from.longitudeDeg)
  const b = direction(to.latitudeDeg, to.longitudeDeg)
  const [x, y, z] = a.map((value, axis) => value + (b[axis] - value) * share)
  return {
    latitudeDeg: Math.atan2(z, Math.hypot(x, y)) / DEGREE,
    longitudeDeg: Math.atan2(y, x) / DEGREE,
  }
}

function direction(latitudeDeg: number, longitudeDeg: number): [number, number, number] {
  const cosine = Math.cos(latitudeDeg * DEGREE)
  return [
    cosine * Math.cos(longitudeDeg * DEGREE),
    cosine * Math.sin(longitudeDeg * DEGREE),
    Math.sin(latitudeDeg * DEGREE),
  ]
}

interface Wind {
  windFromDeg: number
  windSpeedMs: number
}

/** Wind between two, its components straight between theirs. */
export function windBetween(from: Wind, to: Wind, share: number): Wind {
  const part = (component: (angle: number) => number) => {
    const [a, b] = [from, to].map((wind) => wind.windSpeedMs * component(wind.windFromDeg * DEGREE))
    return a + (b - a) * share
  }
  const [east, north] = [part(Math.sin), part(Math.cos)]
  return {
    windFromDeg: (Math.atan2(east, north) / DEGREE + 360) % 360,
    windSpeedMs: Math.hypot(east, north),
  }
}

/** Index of the first row whose ascending `value` is above `wanted`; the length where none is. */
function firstAfter<Row>(
  rows: readonly Row[],
  value: (row: Row) => number,
  wanted: number,
): number {
  let [low, high] = [0, rows.length]
  while (low < high) {
    const middle = (low + high) >> 1
    if (value(rows[middle]) > wanted) high = middle
    else low = middle + 1
  }
  return low
}
