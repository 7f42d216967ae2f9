import { closeSync, fstatSync, openSync, readSync } from 'node:fs'
import { vapourPressure } from '../physics/air.ts'
import { MAGIC, TRAILER_BYTES, type FieldHeader } from './fieldHeader.ts'
import { type Grid } from './grid.ts'
import { Octets } from './octets.ts'
import { type FieldCoverage } from './outsideField.ts'
import { type Quantity } from './product.ts'
import { readGrid } from './readGrid.ts'
import { completePoint } from './missingLevels.ts'
import {
  HEIGHT,
  LEVEL_VALUES,
  TEMPERATURE,
  TILE_BYTES,
  TILE_POINTS,
  TILE_SIDE,
  type Tiling,
  tiling,
  VAPOUR,
  WIND_EAST,
  WIND_NORTH,
} from './tiles.ts'

/** A field file that is not one, or not whole. */
export class FieldFileError extends Error {
  constructor(path: string, reason: string) {
    super(`${path}: ${reason}`)
    this.name = 'FieldFileError'
  }
}

/**
 * A stored field, open for reading. Only its header is held; tiles are read where they are asked for,
 * synchronously, since a flight samples its air in the middle of a step.
 */
export class FieldFile {
  readonly header: FieldHeader
  readonly grid: Grid
  readonly tiling: Tiling
  private readonly descriptor: number
  private readonly buffer = new Float32Array(TILE_POINTS)

  /** @throws FieldFileError; or a system error where the file cannot be opened. */
  constructor(path: string) {
    this.descriptor = openSync(path, 'r')
    try {
      this.header = this.readHeader(path)
      const section = Buffer.from(this.header.grid, 'base64')
      this.grid = readGrid(new Octets(section, 0, section.length, 'section 3'))
      this.tiling = tiling(this.grid)
    } catch (error) {
      closeSync(this.descriptor)
      throw error
    }
  }

  /** Where and when the field has air. */
  get coverage(): FieldCoverage {
    const { grid } = this
    const { validTimes } = this.header
    const [lastColumn, lastRow] = [grid.columns - 1, grid.rows - 1]
    return {
      grid: grid.description,
      corners: [
        grid.position(0, 0),
        grid.position(lastColumn, 0),
        grid.position(0, lastRow),
        grid.position(lastColumn, lastRow),
      ],
      firstTime: validTimes[0],
      lastTime: validTimes[validTimes.length - 1],
    }
  }

  close(): void {
    closeSync(this.descriptor)
  }

  /**
   * The air at the points of one tile at one valid time: for each point in rows, for each level from
   * the ground up, `LEVEL_VALUES` values. Winds are turned to east and north, humidity is brought to
   * vapour pressure over liquid water, and missing levels are completed.
   */
  readTile(time: number, tileColumn: number, tileRow: number): Float32Array {
    const { levels, humidity } = this.header
    const tile = new Float32Array(TILE_POINTS * levels.length * LEVEL_VALUES)
    const index = tileRow * this.tiling.across + tileColumn
    levels.forEach((pressure, level) => {
      this.spread(tile, index, 'geopotentialHeight', time, level, level, HEIGHT)
      this.spread(tile, index, 'temperature', time, level, level, TEMPERATURE)
      this.spread(tile, index, 'windEast', time, level, level, WIND_EAST)
      this.spread(tile, index, 'windNorth', time, level, level, WIND_NORTH)
      const humid = humidity ? humidity.levels.indexOf(pressure) : -1
      if (humidity && humid >= 0) {
        this.spread(tile, index, humidity.quantity, time, humid, level, VAPOUR)
        this.toVapourPressure(tile, level)
      }
    })
    if (this.grid.windsAlongGrid) this.turnWinds(tile, tileColumn, tileRow)
    for (let point = 0; point < TILE_POINTS; point++) completePoint(tile, point, this.header)
    return tile
  }

  /** Reads one quantity at one level and puts it into its places in the tile. */
  private spread(
    tile: Float32Array,
    index: number,
    quantity: Quantity,
    time: number,
    storedLevel: number,
    level: number,
    slot: number,
  ): void {
    const position = this.header.planes[quantity]?.[time]?.[storedLevel]
    if (position === undefined) throw new Error(`no ${quantity} in the field's header`)
    const { buffer, descriptor } = this
    const read = readSync(descriptor, buffer, 0, TILE_BYTES, position + index * TILE_BYTES)
    if (read !== TILE_BYTES) throw new Error('a field file that ends inside a plane')
    const stride = this.header.levels.length * LEVEL_VALUES
    let at = level * LEVEL_VALUES + slot
    for (let point = 0; point < TILE_POINTS; point++, at += stride) tile[at] = buffer[point]
  }

  private toVapourPressure(tile: Float32Array, level: number): void {
    const { levels, humidity } = this.header
    const relative = humidity?.quantity === 'relativeHumidity'
    const pressure = levels[level]
    for (let point = 0; point < TILE_POINTS; point++) {
      const at = (point * levels.length + level) * LEVEL_VALUES
      const given = Math.max(0, tile[at + VAPOUR]) // packing may leave a hair below nothing
      const vapour = relative
        ? given * vapourPressure(tile[at + TEMPERATURE])
        : (given * pressure) / (0.622 + 0.378 * given) // q = 0.622·e/(p − 0.378·e), solved for e
      tile[at + VAPOUR] = Math.min(vapour, pressure / 2) // absurd humidity must not make air without weight
    }
  }

  private turnWinds(tile: Float32Array, tileColumn: number, tileRow: number): void {
    const { grid, header } = this
    for (let point = 0; point < TILE_POINTS; point++) {
      const column = tileColumn * (TILE_SIDE - 1) + (point % TILE_SIDE)
      const row = tileRow * (TILE_SIDE - 1) + Math.floor(point / TILE_SIDE)
      const turn = grid.turn(column, row)
      const cosine = Math.cos(turn)
      const sine = Math.sin(turn)
      for (let level = 0; level < header.levels.length; level++) {
        const at = (point * header.levels.length + level) * LEVEL_VALUES
        const along = tile[at + WIND_EAST]
        const across = tile[at + WIND_NORTH]
        tile[at + WIND_EAST] = along * cosine - across * sine
        tile[at + WIND_NORTH] = along * sine + across * cosine
      }
    }
  }

  private readHeader(path: string): FieldHeader {
    const { size } = fstatSync(this.descriptor)
    const least = MAGIC.length + TRAILER_BYTES
    if (size < least || this.read(0, MAGIC.length).toString('latin1') !== MAGIC) {
      throw new FieldFileError(path, 'not a field file')
    }
    const trailer = this.read(size - TRAILER_BYTES, TRAILER_BYTES)
    const position = trailer.readDoubleLE(0)
    const length = trailer.readDoubleLE(8)
    if (!(length > 0) || position + length !== size - TRAILER_BYTES) {
      throw new FieldFileError(path, 'a field file that is not whole')
    }
    try {
      return JSON.parse(this.read(position, length).toString()) as FieldHeader
    } catch (error) {
      throw new FieldFileError(path, `a header that cannot be read: ${String(error)}`)
    }
  }

  private read(position: number, length: number): Buffer {
    const bytes = Buffer.alloc(length)
    readSync(this.descriptor, bytes, 0, length, position)
    return bytes
  }
}
