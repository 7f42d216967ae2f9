import { plainNumber, reading } from '../readings.ts'
import { type TrackRow } from './shownRun.ts'

const PHASES = {
  ascent: 'ascent',
  burst: 'burst',
  descent: 'descent',
  landing: 'landing',
} satisfies Record<TrackRow['phase'], string>

/** One member of what is read at a moment. */
export interface Reading {
  name: string
  value: string
  /** Longer than the others */
  wide?: boolean
}

/** What is read at a moment of a flight. */
export function readingsAt(row: TrackRow): Reading[] {
  return [
    { name: 'Time', value: `${row.time.slice(11, 19)} UTC` },
    { name: 'After release', value: `${clock(row.elapsedS)}, ${PHASES[row.phase]}` },
    { name: 'Position', value: place(row.latitudeDeg, row.longitudeDeg), wide: true },
    { name: 'Height', value: reading('height', row.altitudeM) },
    { name: 'Vertical speed', value: signed(reading('verticalSpeed', row.verticalSpeedMs, 1)) },
    { name: 'Wind', value: windReading(row.windFromDeg, row.windSpeedMs), wide: true },
  ]
}

/** The same as one line, for those who do not see the pictures. */
export function spokenMoment(row: TrackRow): string {
  return readingsAt(row)
    .map(({ name, value }) => `${name.toLowerCase()} ${value}`)
    .join(', ')
}

/** A span of time as h:mm:ss, or h:mm. */
export function clock(seconds: number, withSeconds = true): string {
  const whole = Math.round(withSeconds ? seconds : seconds / 60)
  const parts = withSeconds
    ? [Math.floor(whole / 3600), Math.floor(whole / 60) % 60, whole % 60]
    : [Math.floor(whole / 60), whole % 60]
  return parts.map((part, index) => (index ? String(part).padStart(2, '0') : part)).join(':')
}

/** A place in decimal degrees with its hemispheres. */
export function place(latitudeDeg: number, longitudeDeg: number, decimals = 4): string {
  const north = `${Math.abs(latitudeDeg).toFixed(decimals)}°\u00a0${latitudeDeg < 0 ? 'S' : 'N'}`
  const east = `${Math.abs(longitudeDeg).toFixed(decimals)}°\u00a0${longitudeDeg < 0 ? 'W' : 'E'}`
  return `${north}, ${east}`
}

function windReading(fromDeg: number, speedMs: number): string {
  const speed = reading('windSpeed', speedMs, 1)
  return speedMs < 0.05
    ? `calm`
    : `${speed} from ${plainNumber(Math.round(fromDeg) % 360).padStart(3, '0')}°`
}

function signed(text: string): string {
  return text.startsWith('\u2212') ? text : `+${text}`
}
