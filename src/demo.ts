import { type FastifyInstance } from 'fastify'
import { type Run } from './service/schemas/run.ts'
import { type Store } from './store/store.ts'

/**
 * An invented sounding over an invented site: geopotential height m, pressure hPa, temperature K, dew
 * point K, wind from °, wind speed m/s. Nobody measured it.
 */
const LEVELS: [number, number | null, number, number | null, number, number][] = [
  [612, 945, 279.4, 275.8, 210, 2.5],
  [900, null, 278.1, 274.6, 225, 5],
  [1480, null, 274.9, 271.0, 240, 8.5],
  [2100, null, 272.2, 262.4, 250, 11],
  [3050, null, 266.8, 255.1, 255, 14],
  [4300, null, 259.0, 246.0, 260, 19],
  [5600, null, 250.3, 236.7, 262, 25],
  [7200, null, 238.9, 226.2, 265, 33],
  [9100, null, 225.4, 213.0, 268, 41],
  [10_400, null, 218.2, null, 270, 44],
  [11_800, null, 215.9, null, 272, 37],
  [13_600, null, 216.8, null, 276, 27],
  [16_200, null, 214.5, null, 281, 18],
  [18_500, null, 213.1, null, 290, 11],
  [20_700, null, 214.9, null, 305, 7],
  [23_800, null, 218.8, null, 320, 6],
  [26_500, null, 222.6, null, 285, 10],
  [29_400, null, 227.0, null, 272, 16],
  [31_000, null, 229.9, null, 270, 19],
]

const SOUNDING = {
  name: 'Invented demo sounding, Larkfell plateau',
  validAt: '2026-12-05T06:00:00Z',
  latitudeDeg: 47.31,
  longitudeDeg: 9.12,
  levels: LEVELS.map(([height, pressure, temperature, dewPoint, from, speed]) => ({
    geopotentialHeightM: height,
    ...(pressure === null ? {} : { pressureHPa: pressure }),
    temperatureK: temperature,
    ...(dewPoint === null ? {} : { dewPointK: dewPoint }),
    windFromDeg: from,
    windSpeedMs: speed,
  })),
}

const FLIGHT = {
  title: 'Invented demo: Larkfell ozone flight, Team Heron',
  launch: { latitudeDeg: 47.31, longitudeDeg: 9.12, altitudeM: 615, time: '2026-12-05T09:00:00Z' },
  balloon: { massG: 1200, ratedBurstDiameterM: 8.6 },
  gas: { kind: 'helium' },
  neckLiftG: 2750,
  payload: { massG: 1600 },
  parachute: { diameterM: 1.3, dragCoefficient: 0.75 },
}

/** Gives an empty store one invented flight, through the front door; null where it is not empty. */
export async function addDemo(app: FastifyInstance, store: Store): Promise<Run | null> {
  if (store.flights.count() > 0) return null
  const post = async <Answer>(url: string, payload: object) => {
    const response = await app.inject({ method: 'POST', url, payload })
    if (response.statusCode !== 201) throw new Error(`the demo was refused: ${response.body}`)
    return response.json<Answer>()
  }
  const { profiles } = await post<{ profiles: { id: string }[] }>('/v1/profiles', SOUNDING)
  const air = { kind: 'profile', id: profiles[0].id }
  const { run } = await post<{ run: Run }>('/v1/flights', { ...FLIGHT, air })
  return run
}

/** A prediction as a short table for the terminal. */
export function demoTable(run: Run): string {
  const { fill, ascent, burst, descent, landing } = run
  const place = (at: { latitudeDeg: number; longitudeDeg: number }) =>
    `${at.latitudeDeg.toFixed(4)}°, ${at.longitudeDeg.toFixed(4)}°`
  const rows = [
    ['fill', `${fill.volumeM3.toFixed(2)} m³, free lift ${Math.round(fill.freeLiftG)} g`],
    ['ascent', `${ascent.releaseRateMs.toFixed(1)} m/s at release, ${minutes(ascent.durationS)}`],
    ['burst', `${Math.round(burst.altitudeM)} m at ${burst.time.slice(11, 16)} UTC`],
    ['descent', `${minutes(descent.durationS)}, lands at ${landing.speedMs.toFixed(1)} m/s`],
    ['landing', `${place(landing)} at ${landing.time.slice(11, 16)} UTC`],
    [
      'from site',
      `${(landing.distanceM / 1000).toFixed(1)} km towards ${Math.round(landing.bearingDeg)}°`,
    ],
  ]
  return [
    'Demo flight (invented team, site and sounding), predicted just now:',
    ...rows.map(([name, value]) => `  ${name.padEnd(10)} ${value}`),
    `  ${run.cautions[0].message}`,
  ].join('\n')
}

function minutes(seconds: number): string {
  return `${Math.round(seconds / 60)} min`
}
