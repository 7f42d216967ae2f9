import { z } from 'zod'
import { BadSounding, MOST_PROBLEMS, type SoundingProblem } from './badSounding.ts'
import { MOST_LEVELS, type ReportedLevel, type ReportedSounding } from './profile.ts'

const DEGREE = Math.PI / 180

/** A schema's message names every unknown member of the content, however many there are. */
const LONGEST_MESSAGE = 300

/** One level of a profile in JSON. */
export const profileLevelSchema = z
  .strictObject({
    pressureHPa: z
      .number()
      .optional()
      .meta({
        description: 'Pressure in hPa. Completed from the height where it is left out.',
        examples: [850],
      }),
    geopotentialHeightM: z
      .number()
      .optional()
      .meta({
        description:
          'Geopotential height above mean sea level in m. Completed from the pressure where it is left out. Wins over altitudeM.',
        examples: [1457],
      }),
    altitudeM: z
      .number()
      .optional()
      .meta({
        description:
          'Geometric altitude above mean sea level in m, in place of geopotentialHeightM.',
        examples: [1457.3],
      }),
    temperatureK: z
      .number()
      .optional()
      .meta({
        description: 'Air temperature in K, 150 to 350.',
        examples: [281.3],
      }),
    dewPointK: z
      .number()
      .optional()
      .meta({
        description: 'Dew point over liquid water in K. Wins over relativeHumidityPercent.',
        examples: [275.1],
      }),
    relativeHumidityPercent: z
      .number()
      .optional()
      .meta({
        description: 'Relative humidity over liquid water in %.',
        examples: [65],
      }),
    windFromDeg: z
      .number()
      .optional()
      .meta({
        description: 'Direction the wind blows from, degrees clockwise from true north, 0 to 360.',
        examples: [270],
      }),
    windSpeedMs: z
      .number()
      .optional()
      .meta({
        description: 'Wind speed in m/s, up to 150.',
        examples: [12.5],
      }),
    elapsedS: z
      .number()
      .optional()
      .meta({
        description: "Seconds since the sonde's release.",
        examples: [300],
      }),
  })
  .meta({
    description:
      'One level: a pressure or a height, and what was measured there. Temperature and wind may stand at levels of their own.',
  })

/** A profile in JSON, as it is uploaded. */
export const profileSchema = z
  .strictObject({
    name: z
      .string()
      .trim()
      .min(1)
      .max(200)
      .optional()
      .meta({
        description: 'What to call the profile.',
        examples: ['Morning sounding'],
      }),
    validAt: z.iso
      .datetime({ offset: true })
      .optional()
      .meta({
        description: 'When the sounding was taken, ISO 8601 with Z or an offset.',
        examples: ['2026-12-05T06:00:00Z'],
      }),
    latitudeDeg: z
      .number()
      .min(-90)
      .max(90)
      .optional()
      .meta({
        description: 'Latitude of the station in degrees, north positive.',
        examples: [47.05],
      }),
    longitudeDeg: z
      .number()
      .min(-180)
      .max(180)
      .optional()
      .meta({
        description: 'Longitude of the station in degrees, east positive.',
        examples: [8.31],
      }),
    levels: z.array(profileLevelSchema).max(MOST_LEVELS).meta({
      description:
        'Levels in any order: at least two with wind, and two or more, or none, with temperature.',
    }),
  })
  .meta({ description: 'An atmospheric sounding: temperature, humidity and wind by level.' })

/** The profile with its levels unread, so that a hostile body is refused at its first bad levels. */
const envelopeSchema = profileSchema.extend({ levels: z.array(z.unknown()).max(MOST_LEVELS) })

/** Reads a profile in JSON. Throws `BadSounding` with JSON pointers. */
export function readJson(text: string): ReportedSounding {
  let content: unknown
  try {
    content = JSON.parse(text)
  } catch (error) {
    const reason = error instanceof Error ? error.message : 'unreadable'
    throw new BadSounding('unparseable', [{ path: '', message: `not JSON: ${reason}` }])
  }
  const envelope = envelopeSchema.safeParse(content)
  if (!envelope.success) throw refusal(problemsOf(envelope.error, ''))
  const { name, validAt, latitudeDeg, longitudeDeg } = envelope.data
  if ((latitudeDeg === undefined) !== (longitudeDeg === undefined)) {
    const missing = latitudeDeg === undefined ? 'latitudeDeg' : 'longitudeDeg'
    throw refusal([{ path: `/${missing}`, message: 'latitude and longitude come together' }])
  }
  return {
    name: name ?? null,
    station: null,
    validAt: validAt === undefined ? null : Date.parse(validAt) / 1000,
    latitude: latitudeDeg === undefined ? null : latitudeDeg * DEGREE,
    longitude: longitudeDeg === undefined ? null : longitudeDeg * DEGREE,
    levels: readLevels(envelope.data.levels),
    place: { path: '/levels' },
  }
}

function readLevels(levels: readonly unknown[]): ReportedLevel[] {
  const read: ReportedLevel[] = []
  const problems: SoundingProblem[] = []
  for (const [index, content] of levels.entries()) {
    const path = `/levels/${index}`
    const level = profileLevelSchema.safeParse(content)
    if (level.success) read.push(reported(level.data, path))
    else problems.push(...problemsOf(level.error, path))
    if (problems.length >= MOST_PROBLEMS) break
  }
  if (problems.length > 0) throw refusal(problems)
  return read
}

function reported(level: z.infer<typeof profileLevelSchema>, path: string): ReportedLevel {
  const read: ReportedLevel = { place: { path } }
  if (level.pressureHPa !== undefined) read.pressure = level.pressureHPa * 100
  if (level.geopotentialHeightM !== undefined) read.geopotentialHeight = level.geopotentialHeightM
  if (level.altitudeM !== undefined) read.altitude = level.altitudeM
  if (level.temperatureK !== undefined) read.temperature = level.temperatureK
  if (level.dewPointK !== undefined) read.dewPoint = level.dewPointK
  if (level.relativeHumidityPercent !== undefined) {
    read.relativeHumidity = level.relativeHumidityPercent / 100
  }
  if (level.windFromDeg !== undefined) read.windFrom = level.windFromDeg * DEGREE
  if (level.windSpeedMs !== undefined) read.windSpeed = level.windSpeedMs
  if (level.elapsedS !== undefined) read.elapsed = level.elapsedS
  return read
}

function problemsOf(error: z.ZodError, base: string): SoundingProblem[] {
  return error.issues.map((issue) => ({
    path: base + issue.path.map((key) => `/${pointerToken(String(key))}`).join(''),
    message: issue.message.slice(0, LONGEST_MESSAGE),
  }))
}

function pointerToken(key: string): string {
  return key.replaceAll('~', '~0').replaceAll('/', '~1') // RFC 6901, section 3
}

function refusal(problems: readonly SoundingProblem[]): BadSounding {
  return new BadSounding('unparseable', problems.slice(0, MOST_PROBLEMS))
}
