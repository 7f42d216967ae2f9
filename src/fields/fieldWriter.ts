import { open, rename, rm, type FileHandle } from 'node:fs/promises'
import { dirname } from 'node:path'
import {
  chooseLevels,
  MAGIC,
  TRAILER_BYTES,
  type FieldHeader,
  type StoredPlane,
} from './fieldHeader.ts'
import { GribError } from './gribError.ts'
import { gribPlanes, SkippedMessages, type Plane } from './planes.ts'
import { DEFAULT_MESSAGE_LIMITS, type MessageLimits } from './gribMessages.ts'
import { type Quantity } from './product.ts'
import { cutIntoTiles } from './tiles.ts'

/** Small planes are written together. */
const WRITE_BYTES = 4 * 2 ** 20

/** How much of a file is decoded: a short message may truly hold millions of values. */
export interface FieldLimits extends MessageLimits {
  /** Planes */
  planes: number
  /** Decoded values of all planes, bytes */
  decodedBytes: number
}

export const DEFAULT_FIELD_LIMITS: FieldLimits = {
  ...DEFAULT_MESSAGE_LIMITS,
  planes: 40_000,
  decodedBytes: 16 * 2 ** 30,
}

/**
 * Reads a GRIB file from its bytes and stores the air in it at `path`, holding one plane at a time in
 * memory. The file appears whole, and safe on disk, or not at all.
 *
 * The form: `MAGIC`; planes of little-endian 32-bit floats in SI, each cut into tiles (tiles.ts); the
 * header as JSON; the trailer.
 * @throws GribError where the bytes are damaged or are not air to fly in.
 */
export async function storeField(
  chunks: AsyncIterable<Uint8Array>,
  path: string,
  limits: FieldLimits = DEFAULT_FIELD_LIMITS,
): Promise<FieldHeader> {
  const part = `${path}.part`
  const file = await open(part, 'w')
  try {
    const skipped = new SkippedMessages()
    const writer = new PlaneWriter(file, skipped, limits)
    await writer.start()
    for await (const plane of gribPlanes(chunks, skipped, limits)) await writer.add(plane)
    const header = await writer.finish()
    await file.sync()
    await file.close()
    await rename(part, path)
    await syncDirectory(dirname(path))
    return header
  } catch (error) {
    await file.close().catch(() => undefined)
    await rm(part, { force: true })
    throw error
  }
}

/** Writes planes as they come and remembers where. */
class PlaneWriter {
  private readonly file: FileHandle
  private readonly skipped: SkippedMessages
  private readonly stored = new Map<string, StoredPlane>()
  /** What every plane has in common with the first one. */
  private first: Pick<Plane, 'grid' | 'gridSection' | 'origin'> | null = null
  private readonly limits: FieldLimits
  /** Written or waiting to be */
  private end = 0
  private pending: Uint8Array[] = []
  private pendingBytes = 0
  private planes = 0
  private decodedBytes = 0

  constructor(file: FileHandle, skipped: SkippedMessages, limits: FieldLimits) {
    this.limits = limits
    this.file = file
    this.skipped = skipped
  }

  async start(): Promise<void> {
    await this.append(Buffer.from(MAGIC, 'latin1'))
  }

  /** Stores a plane of the first one's grid and centre; of two for the same place and time the later run's. */
  async add(plane: Plane): Promise<void> {
    this.planes++
    this.decodedBytes += plane.values.length * Float32Array.BYTES_PER_ELEMENT
    if (this.planes > this.limits.planes || this.decodedBytes > this.limits.decodedBytes) {
      throw new GribError(
        'too-large',
        `more than ${this.limits.planes} planes or ${this.limits.decodedBytes} bytes of values`,
      )
    }
    const extent = range(plane.values)
    checkPlausible(plane.quantity, extent)
    this.first ??= {
      grid: plane.grid,
      gridSection: plane.gridSection.slice(), // a copy: the rest of the message is not to be kept
      origin: plane.origin,
    }
    const { grid, gridSection, origin } = this.first
    if (Buffer.compare(plane.gridSection, gridSection) !== 0) {
      this.skipped.add(`${plane.quantity}: on another grid than the first`)
      return
    }
    // The process may differ: some centres number a run's analysis otherwise than its forecasts.
    if (plane.origin.centre !== origin.centre) {
      this.skipped.add(`${plane.quantity}: from another centre than the first`)
      return
    }
    const key = `${plane.quantity} ${plane.pressure} ${plane.validTime}`
    const before = this.stored.get(key)
    if (before) {
      this.skipped.add(`${plane.quantity}: given twice for a level and time`)
      if (before.referenceTime >= plane.referenceTime) return
    }
    const position = this.end
    await this.append(Buffer.from(cutIntoTiles(plane.values, grid).buffer))
    const { quantity, pressure, validTime, referenceTime } = plane
    this.stored.set(key, {
      quantity,
      pressure,
      validTime,
      referenceTime,
      position,
      ...extent,
    })
  }

  async finish(): Promise<FieldHeader> {
    const choice = chooseLevels(this.stored.values())
    if (this.first === null || choice === null) {
      throw new GribError(
        'incomplete',
        'the file does not hold height, temperature and both winds on at least two pressure levels at one time',
      )
    }
    for (const reason of choice.unused) this.skipped.add(reason)
    const heights = choice.planes.geopotentialHeight?.flat() ?? []
    const positions: Partial<Record<Quantity, number[][]>> = {}
    for (const [quantity, planes] of Object.entries(choice.planes)) {
      positions[quantity as Quantity] = planes.map((levels) =>
        levels.map(({ position }) => position),
      )
    }
    const header: FieldHeader = {
      origin: this.first.origin,
      referenceTime: heights.reduce(
        (latest, { referenceTime }) => Math.max(latest, referenceTime),
        -Infinity,
      ),
      validTimes: choice.validTimes,
      levels: choice.levels,
      humidity: choice.humidity,
      heights: {
        bottom: heights.reduce((least, plane) => Math.min(least, plane.least), Infinity),
        top: heights.reduce((greatest, plane) => Math.max(greatest, plane.greatest), -Infinity),
      },
      grid: Buffer.from(this.first.gridSection).toString('base64'),
      planes: positions,
      skipped: this.skipped.list(),
    }
    if (!Number.isFinite(header.heights.top - header.heights.bottom)) {
      throw new GribError('incomplete', 'a pressure level without any height')
    }
    const json = Buffer.from(JSON.stringify(header))
    const trailer = Buffer.alloc(TRAILER_BYTES)
    trailer.writeDoubleLE(this.end, 0)
    trailer.writeDoubleLE(json.length, 8)
    await this.append(json)
    await this.append(trailer)
    await this.flush()
    return header
  }

  private async append(bytes: Uint8Array): Promise<void> {
    this.pending.push(bytes)
    this.pendingBytes += bytes.length
    this.end += bytes.length
    if (this.pendingBytes >= WRITE_BYTES) await this.flush()
  }

  private async flush(): Promise<void> {
    await this.file.writeFile(Buffer.concat(this.pending)) // goes on where the last write ended
    this.pending = []
    this.pendingBytes = 0
  }
}

/** What no air on earth goes beyond, SI: values past these come of damage, and a flight in them of nothing. */
const PLAUSIBLE: Readonly<Record<Quantity, readonly [number, number]>> = {
  temperature: [100, 400],
  geopotentialHeight: [-3000, 100_000],
  relativeHumidity: [-0.5, 10],
  specificHumidity: [-0.1, 0.2],
  windEast: [-500, 500],
  windNorth: [-500, 500],
}

function checkPlausible(quantity: Quantity, { least, greatest }: Extent): void {
  const [low, high] = PLAUSIBLE[quantity]
  if (least < low || greatest > high) {
    throw new GribError('damaged', `${quantity} from ${least} to ${greatest} (SI)`)
  }
}

interface Extent {
  least: number
  greatest: number
}

function range(values: Float64Array): Extent {
  let least = Infinity
  let greatest = -Infinity
  for (let point = 0; point < values.length; point++) {
    const value = values[point] // NaN is neither less nor greater
    if (value < least) least = value
    if (value > greatest) greatest = value
  }
  return least <= greatest ? { least, greatest } : { least: NaN, greatest: NaN }
}

async function syncDirectory(path: string): Promise<void> {
  const directory = await open(path, 'r')
  try {
    await directory.sync()
  } finally {
    await directory.close()
  }
}
