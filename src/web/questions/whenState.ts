import { signal } from '@preact/signals'
import { type WindowsAnswer } from '../../service/schemas/windows.ts'
import { kept } from '../kept.ts'
import { draft } from '../plan/planState.ts'
import { numberReader, requestOf, type Fault } from '../plan/request.ts'
import { areas, areasRequest } from './areas.ts'
import { Work } from './work.ts'

/** Release times and limits as they are being typed: times in UTC to the minute. */
export interface WhenDraft {
  from: string
  to: string
  stepMinutes: string
  /** Soundings to fly in; the sheet's air where there are none */
  profileIds: string[]
  between: 'interpolated' | 'nearest'
  useAreas: boolean
  fromLatitudeDeg: string
  fromLongitudeDeg: string
  distanceAtLeastKm: string
  distanceAtMostKm: string
  sunDeg: string
  burstAtLeastM: string
  burstAtMostM: string
  region90Km2: string
  groundWindMs: string
}

/** Texts of the limits, in the order in which they are asked for. */
export type LimitName = Exclude<
  keyof WhenDraft,
  'from' | 'to' | 'stepMinutes' | 'profileIds' | 'between' | 'useAreas'
>

const HOUR = 3_600_000

/** A day's half around a release (UTC to the minute). */
export function spanAround(releaseTime: string): Pick<WhenDraft, 'from' | 'to'> {
  const release = Date.parse(`${releaseTime}Z`)
  const minute = (time: number) => new Date(time).toISOString().slice(0, 16)
  if (Number.isNaN(release)) return { from: '', to: '' }
  return { from: minute(release - 6 * HOUR), to: minute(release + 6 * HOUR) }
}

const newWhenDraft: WhenDraft = {
  ...spanAround(draft.peek().releaseTime),
  stepMinutes: '60',
  profileIds: [],
  between: 'interpolated',
  useAreas: true,
  fromLatitudeDeg: '',
  fromLongitudeDeg: '',
  distanceAtLeastKm: '',
  distanceAtMostKm: '',
  sunDeg: '0',
  burstAtLeastM: '',
  burstAtMostM: '',
  region90Km2: '',
  groundWindMs: '6',
}

export const whenDraft = kept<WhenDraft>(
  'driftbook.when.1',
  newWhenDraft,
  (value): value is WhenDraft =>
    typeof value === 'object' &&
    value !== null &&
    Object.entries(newWhenDraft).every(
      ([name, fresh]) => typeof (value as Record<string, unknown>)[name] === typeof fresh,
    ) &&
    Array.isArray((value as { profileIds?: unknown }).profileIds),
)

/** When to release the plan on the sheet. */
export const windows = new Work<WindowsAnswer>('/v1/windows')

/** The release time that is looked at; null for the best. */
export const lookedAt = signal<string | null>(null)

/** What is asked for the sheet and the limits as they stand, and what in the latter is no number. */
export function whenRequest(): { request: object; faults: Fault[] } {
  const { title: _title, ...plan } = requestOf(draft.value).request
  const typed = whenDraft.value
  const { number, faults } = numberReader()
  const distance = {
    latitudeDeg: number('/limits/landingDistanceM/latitudeDeg', typed.fromLatitudeDeg),
    longitudeDeg: number('/limits/landingDistanceM/longitudeDeg', typed.fromLongitudeDeg),
    atLeast: number('/limits/landingDistanceM/atLeast', typed.distanceAtLeastKm, 1000),
    atMost: number('/limits/landingDistanceM/atMost', typed.distanceAtMostKm, 1000),
  }
  const burst = {
    atLeast: number('/limits/burstAltitudeM/atLeast', typed.burstAtLeastM),
    atMost: number('/limits/burstAltitudeM/atMost', typed.burstAtMostM),
  }
  const given = (range: { atLeast?: number | undefined; atMost?: number | undefined }) =>
    range.atLeast !== undefined || range.atMost !== undefined
  const { latitudeDeg, longitudeDeg } = plan.launch as Record<string, unknown>
  const wanted = areas.value.filter((area) => typed.useAreas && area.wanted)
  const avoided = areas.value.filter((area) => typed.useAreas && !area.wanted)
  const limits = {
    landingInside: areasRequest(wanted),
    landingOutside: areasRequest(avoided),
    landingDistanceM: given(distance)
      ? {
          ...distance,
          latitudeDeg: distance.latitudeDeg ?? latitudeDeg,
          longitudeDeg: distance.longitudeDeg ?? longitudeDeg,
        }
      : undefined,
    sunElevationDeg: number('/limits/sunElevationDeg', typed.sunDeg),
    burstAltitudeM: given(burst) ? burst : undefined,
    region90Km2: number('/limits/region90Km2', typed.region90Km2),
    groundWindMs: number('/limits/groundWindMs', typed.groundWindMs),
  }
  const request = {
    plan,
    from: iso(typed.from),
    to: iso(typed.to),
    stepMinutes: number('/stepMinutes', typed.stepMinutes),
    profileIds: typed.profileIds.length > 0 ? typed.profileIds : undefined,
    betweenProfiles: typed.between,
    limits,
  }
  return { request, faults }
}

function iso(minute: string): string | undefined {
  const time = new Date(`${minute}Z`)
  return Number.isNaN(time.getTime()) ? undefined : time.toISOString()
}
