import { STANDARD_GRAVITY } from '../physics/constants.ts'
import { BadSounding } from './badSounding.ts'
import { cellOf, type BufrBlock, type Cell } from './bufrBlock.ts'
import { bufrSubsets, stepsFor } from './bufrData.ts'
import { type StepsLeft } from './bufrDecoder.ts'
import { BufrError } from './bufrError.ts'
import { bufrMessages, timeOf, type BufrMessage } from './bufrMessage.ts'
import { type Notes } from './notes.ts'
import {
  MOST_LEVELS,
  MOST_SOUNDINGS,
  type ReportedLevel,
  type ReportedSounding,
} from './profile.ts'

const DEGREE = Math.PI / 180

/** After so many messages that cannot be read, what follows is no file of messages. */
const MOST_FAILURES = 1000

type NumberOf = (...descriptors: number[]) => number | undefined

/**
 * Reads every sounding in a file of BUFR messages, edition 2 to 4, compressed or not, whatever
 * sequence they are made of, as long as their levels are replicated. Messages that cannot be read are
 * dropped with a note; throws `BadSounding` where no sounding is found at all.
 */
export function readBufr(bytes: Uint8Array, notes: Notes): ReportedSounding[] {
  const soundings: ReportedSounding[] = []
  let reason: string | null = null
  const left = stepsFor(bytes.length)
  let count = 0
  let failures = 0
  for (const message of bufrMessages(bytes)) {
    count++
    const label = `message ${count}`
    try {
      if (message instanceof BufrError) throw message
      const before = soundings.length
      readMessage(message, label, left, soundings)
      if (soundings.length === before) throw new BufrError('it holds no levels of a sounding')
    } catch (error) {
      if (!(error instanceof BufrError)) throw error
      reason ??= error.message
      notes.add(`BUFR message dropped: ${error.message}`, { label })
      if (++failures >= MOST_FAILURES) break
    }
  }
  if (soundings.length === 0) {
    throw new BadSounding('unparseable', [
      { message: `no sounding in BUFR: ${reason ?? 'no message'}` },
    ])
  }
  return soundings
}

function readMessage(
  message: BufrMessage,
  label: string,
  left: StepsLeft,
  soundings: ReportedSounding[],
): void {
  if (message.masterTable !== 0) throw new BufrError('not of meteorology: master table is not 0')
  let subsets = 0
  for (const { block, subset } of bufrSubsets(message, left)) {
    subsets++
    const place = message.subsets > 1 ? `${label} subset ${subsets}` : label
    const header = numbers(block, subset)
    const sounding: ReportedSounding = {
      name: null,
      station: stationOf(block, subset),
      validAt: releaseOf(header) ?? message.time,
      ...positionOf(header),
      levels: [],
      place: { label: place },
    }
    readLevels(block, subset, sounding)
    if (sounding.levels.length === 0) continue
    if (soundings.length >= MOST_SOUNDINGS)
      throw new BufrError(`more than ${MOST_SOUNDINGS} soundings`)
    soundings.push(sounding)
  }
}

/** Adds a level for every pass through a replication that tells where it stands and what is there. */
function readLevels(block: BufrBlock, subset: number, sounding: ReportedSounding): void {
  for (const inner of block.blocks) {
    if (sounding.levels.length >= MOST_LEVELS) return
    const level = readLevel(numbers(inner, subset), sounding)
    if (level) sounding.levels.push(level)
    readLevels(inner, subset, sounding)
  }
}

/** Descriptors: WMO-No. 306, volume I.2, table B; units there are Pa, m, m²/s², K, %, ° and m/s. */
function readLevel(number: NumberOf, { levels, place, latitude, longitude }: ReportedSounding) {
  const label = 'label' in place ? `${place.label}, level ${levels.length + 1}` : ''
  const level: ReportedLevel = { place: { label } }
  set(level, 'pressure', number(7004))
  const geopotential = number(10_008, 10_003, 7003)
  set(level, 'geopotentialHeight', number(10_009, 7009))
  if (geopotential !== undefined) level.geopotentialHeight ??= geopotential / STANDARD_GRAVITY
  set(level, 'altitude', number(7007, 7002, 10_007))
  set(level, 'temperature', number(12_101, 12_001))
  set(level, 'dewPoint', number(12_103, 12_003))
  set(level, 'relativeHumidity', number(13_009, 13_003), 0.01)
  set(level, 'windFrom', number(11_001), DEGREE)
  set(level, 'windSpeed', number(11_002))
  const east = number(11_003)
  const north = number(11_004)
  if (east !== undefined && north !== undefined && level.windSpeed === undefined) {
    level.windSpeed = Math.hypot(east, north)
    level.windFrom = Math.atan2(-east, -north)
    if (level.windFrom < 0) level.windFrom += 2 * Math.PI
  }
  set(level, 'elapsed', number(4086, 4026))
  const minutes = number(4025)
  if (minutes !== undefined) level.elapsed ??= minutes * 60
  const displacement = displacementOf(number, latitude, longitude)
  if (displacement) level.displacement = displacement

  const placed = level.pressure ?? level.geopotentialHeight ?? level.altitude
  const told = level.temperature ?? level.windSpeed ?? level.windFrom
  const anchors = level.pressure !== undefined && level.geopotentialHeight !== undefined
  return placed !== undefined && (told !== undefined || anchors) ? level : null
}

function displacementOf(number: NumberOf, latitude: number | null, longitude: number | null) {
  const north = number(5015)
  const east = number(6015)
  if (north !== undefined && east !== undefined) {
    return { latitude: north * DEGREE, longitude: east * DEGREE }
  }
  const { latitude: here, longitude: there } = positionOf(number)
  if (here === null || there === null || latitude === null || longitude === null) return null
  return { latitude: here - latitude, longitude: there - longitude }
}

function positionOf(number: NumberOf): { latitude: number | null; longitude: number | null } {
  const latitude = number(5001, 5002)
  const longitude = number(6001, 6002)
  const known =
    latitude !== undefined &&
    longitude !== undefined &&
    Math.abs(latitude) <= 90 &&
    Math.abs(longitude) <= 360
  return {
    latitude: known ? latitude * DEGREE : null,
    longitude: known ? longitude * DEGREE : null,
  }
}

function releaseOf(number: NumberOf): number | null {
  const [year, month, day, hour] = [4001, 4002, 4003, 4004].map((descriptor) => number(descriptor))
  if (year === undefined || month === undefined || day === undefined || hour === undefined) {
    return null
  }
  return timeOf(year, month, day, hour, number(4005) ?? 0, number(4006) ?? 0)
}

/** Block and station number, or the identifier of the WMO Integrated Global Observing System, or a name. */
function stationOf({ elements }: BufrBlock, subset: number): string | null {
  const cells = new Map<number, Cell>()
  for (const element of elements) {
    if (!cells.has(element.descriptor)) cells.set(element.descriptor, cellOf(element, subset))
  }
  const text = (descriptor: number): string | null => {
    const cell = cells.get(descriptor)
    const plain = typeof cell === 'string' ? cell.replace(/[^\x21-\x7e]+/g, ' ').trim() : ''
    return plain === '' ? null : plain
  }
  const block = cells.get(1001)
  const station = cells.get(1002)
  if (typeof block === 'number' && typeof station === 'number') {
    return String(block).padStart(2, '0') + String(station).padStart(3, '0')
  }
  const [series, issuer, issue] = [1125, 1126, 1127].map((descriptor) => cells.get(descriptor))
  const local = text(1128)
  if (typeof series === 'number' && local !== null)
    return `${series}-${issuer ?? 0}-${issue ?? 0}-${local}`
  return text(1011) ?? text(1015) ?? text(1019) ?? text(1006)
}

/** The first number that one of some descriptors has, in the order asked for. */
function numbers({ elements }: BufrBlock, subset: number): NumberOf {
  const found = new Map<number, number>()
  for (const element of elements) {
    const cell = cellOf(element, subset)
    if (typeof cell === 'number' && !found.has(element.descriptor))
      found.set(element.descriptor, cell)
  }
  return (...descriptors) => {
    for (const descriptor of descriptors) {
      const value = found.get(descriptor)
      if (value !== undefined) return value
    }
    return undefined
  }
}

type Settable = Exclude<keyof ReportedLevel, 'place' | 'displacement'>

function set(level: ReportedLevel, quantity: Settable, value: number | undefined, scale = 1): void {
  if (value !== undefined) level[quantity] = value * scale
}
