import {
  emptyAirState,
  viscosity,
  type AirState,
  type AltitudeSpan,
  type ColumnAir,
} from '../physics/air.ts'

/**
 * The air between two columns of different times: temperature and wind linear in time, pressure and
 * density geometric. `share` is 0 at the earlier and 1 at the later.
 */
export class BlendedAir implements ColumnAir {
  readonly breakAltitudes: Float64Array
  readonly observed: { temperature: AltitudeSpan | null; wind: AltitudeSpan | null }
  private readonly earlier: ColumnAir
  private readonly later: ColumnAir
  private readonly share: number
  private readonly scratch = emptyAirState()

  constructor(earlier: ColumnAir, later: ColumnAir, share: number) {
    this.earlier = earlier
    this.later = later
    this.share = share
    this.breakAltitudes = Float64Array.from(
      new Set([...earlier.breakAltitudes, ...later.breakAltitudes]),
    ).sort()
    this.observed = {
      temperature: common(earlier.observed.temperature, later.observed.temperature),
      wind: common(earlier.observed.wind, later.observed.wind),
    }
  }

  sample(
    _latitude: number,
    _longitude: number,
    altitude: number,
    _time: number,
    out: AirState,
  ): void {
    this.sampleAltitude(altitude, out)
  }

  sampleAltitude(altitude: number, out: AirState): void {
    const { share, scratch } = this
    this.earlier.sampleAltitude(altitude, scratch)
    this.later.sampleAltitude(altitude, out)
    out.temperature = scratch.temperature + share * (out.temperature - scratch.temperature)
    out.pressure = scratch.pressure * (out.pressure / scratch.pressure) ** share
    out.density = scratch.density * (out.density / scratch.density) ** share
    out.windEast = scratch.windEast + share * (out.windEast - scratch.windEast)
    out.windNorth = scratch.windNorth + share * (out.windNorth - scratch.windNorth)
    out.viscosity = viscosity(out.temperature)
  }
}

/** What both columns observed. */
function common(a: AltitudeSpan | null, b: AltitudeSpan | null): AltitudeSpan | null {
  if (!a || !b) return null
  return { bottom: Math.max(a.bottom, b.bottom), top: Math.min(a.top, b.top) }
}
