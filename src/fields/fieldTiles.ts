import { type FieldFile } from './fieldFile.ts'
import { type GridPlace } from './grid.ts'
import { OutsideField, type OutsidePolicy } from './outsideField.ts'
import { HEIGHT, LEVEL_VALUES, TEMPERATURE, TILE_CELLS, TILE_SIDE } from './tiles.ts'

/** Tiles kept in memory; one of 26 levels takes 150 kB, and a flight crosses two or three, twice in time. */
const MOST_TILES = 48

/** How far, in cells, a place may lie beyond the last point and still count as on it: rounding. */
const ON_EDGE = 1e-6

/**
 * Values of a field's levels at one place and time, between grid points and valid times. The air of a
 * flight is at one place after another, so the tiles it needs are kept.
 */
export class FieldTiles {
  private readonly file: FieldFile
  private readonly outside: OutsidePolicy
  private readonly cached = new Map<number, Float32Array>()
  private readonly times: Float64Array
  private readonly lastTime: number
  private readonly stride: number
  private readonly rowStride: number
  private readonly place: GridPlace = { column: 0, row: 0 }
  private heldPlace = false
  private heldTime = false

  // The place located last: tiles of the two valid times, the cell in them, the weights of its corners.
  private early: Float32Array = new Float32Array(0)
  private late: Float32Array = new Float32Array(0)
  private tileKey = -1
  private timeIndex = -1
  private cell = 0
  private e00 = 0
  private e01 = 0
  private e10 = 0
  private e11 = 0
  private l00 = 0
  private l01 = 0
  private l10 = 0
  private l11 = 0

  constructor(file: FieldFile, outside: OutsidePolicy) {
    this.file = file
    this.outside = outside
    this.times = Float64Array.from(file.header.validTimes)
    this.lastTime = this.times.length - 1
    this.stride = file.header.levels.length * LEVEL_VALUES
    this.rowStride = this.stride * TILE_SIDE
  }

  /** Goes to a latitude and longitude in radians and a time in s since 1970 UTC. Throws OutsideField. */
  locate(latitude: number, longitude: number, time: number): void {
    const { place } = this
    const { grid, tiling } = this.file
    grid.locate(latitude, longitude, place)
    const lastColumn = grid.wraps ? grid.columns : grid.columns - 1
    const lastRow = grid.rows - 1
    let { column, row } = place
    if (!(column >= 0 && column <= lastColumn && row >= 0 && row <= lastRow)) {
      const over = Math.max(-column, column - lastColumn, -row, row - lastRow)
      if (!(over < ON_EDGE)) {
        if (this.outside === 'refuse' || !Number.isFinite(over)) {
          this.refuse('grid', latitude, longitude, time)
        }
        this.heldPlace = true
      }
      column = Math.min(Math.max(column, 0), lastColumn)
      row = Math.min(Math.max(row, 0), lastRow)
    }
    const cellColumn = Math.min(Math.floor(column), lastColumn - 1)
    const cellRow = Math.min(Math.floor(row), lastRow - 1)
    const tileColumn = Math.floor(cellColumn / TILE_CELLS)
    const tileRow = Math.floor(cellRow / TILE_CELLS)
    const share = this.locateTime(latitude, longitude, time)
    const tileKey = tileRow * tiling.across + tileColumn
    if (tileKey !== this.tileKey) this.load(tileKey, tileColumn, tileRow)

    this.cell =
      (cellRow - tileRow * TILE_CELLS) * this.rowStride +
      (cellColumn - tileColumn * TILE_CELLS) * this.stride
    const x = column - cellColumn
    const y = row - cellRow
    const w11 = x * y
    const w01 = x - w11
    const w10 = y - w11
    const w00 = 1 - x - w10
    this.l00 = w00 * share
    this.l01 = w01 * share
    this.l10 = w10 * share
    this.l11 = w11 * share
    this.e00 = w00 - this.l00
    this.e01 = w01 - this.l01
    this.e10 = w10 - this.l10
    this.e11 = w11 - this.l11
  }

  /** Fills `out` with the `LEVEL_VALUES` values of a level at the located place. */
  level(level: number, out: Float64Array): void {
    const { early, late, e00, e01, e10, e11, l00, l01, l10, l11 } = this
    const first = this.cell + level * LEVEL_VALUES
    const nextColumn = first + this.stride
    const nextRow = first + this.rowStride
    const opposite = nextRow + this.stride
    for (let slot = 0; slot < LEVEL_VALUES; slot++) {
      out[slot] =
        e00 * early[first + slot] +
        e01 * early[nextColumn + slot] +
        e10 * early[nextRow + slot] +
        e11 * early[opposite + slot] +
        l00 * late[first + slot] +
        l01 * late[nextColumn + slot] +
        l10 * late[nextRow + slot] +
        l11 * late[opposite + slot]
    }
  }

  /**
   * Fills `out` with the `LEVEL_VALUES` values at a share of the way from a level to the next; the height
   * is left out.
   */
  between(level: number, share: number, out: Float64Array): void {
    const { early, late, stride } = this
    const first = this.cell + level * LEVEL_VALUES
    const nextColumn = first + stride
    const nextRow = first + this.rowStride
    const opposite = nextRow + stride
    const e00 = this.e00 * share
    const e01 = this.e01 * share
    const e10 = this.e10 * share
    const e11 = this.e11 * share
    const l00 = this.l00 * share
    const l01 = this.l01 * share
    const l10 = this.l10 * share
    const l11 = this.l11 * share
    const d00 = this.e00 - e00
    const d01 = this.e01 - e01
    const d10 = this.e10 - e10
    const d11 = this.e11 - e11
    const k00 = this.l00 - l00
    const k01 = this.l01 - l01
    const k10 = this.l10 - l10
    const k11 = this.l11 - l11
    for (let slot = TEMPERATURE; slot < LEVEL_VALUES; slot++) {
      const upper = slot + LEVEL_VALUES
      out[slot] =
        d00 * early[first + slot] +
        d01 * early[nextColumn + slot] +
        d10 * early[nextRow + slot] +
        d11 * early[opposite + slot] +
        k00 * late[first + slot] +
        k01 * late[nextColumn + slot] +
        k10 * late[nextRow + slot] +
        k11 * late[opposite + slot] +
        e00 * early[first + upper] +
        e01 * early[nextColumn + upper] +
        e10 * early[nextRow + upper] +
        e11 * early[opposite + upper] +
        l00 * late[first + upper] +
        l01 * late[nextColumn + upper] +
        l10 * late[nextRow + upper] +
        l11 * late[opposite + upper]
    }
  }

  /** Geopotential height, m, of a level at the located place. */
  height(level: number): number {
    const { early, late, stride, rowStride } = this
    const at = this.cell + level * LEVEL_VALUES + HEIGHT
    const nextRow = at + rowStride
    return (
      this.e00 * early[at] +
      this.e01 * early[at + stride] +
      this.e10 * early[nextRow] +
      this.e11 * early[nextRow + stride] +
      this.l00 * late[at] +
      this.l01 * late[at + stride] +
      this.l10 * late[nextRow] +
      this.l11 * late[nextRow + stride]
    )
  }

  /** Whether the nearest place or time was taken for one outside since the last call. */
  takeHeld(): { heldPlace: boolean; heldTime: boolean } {
    const { heldPlace, heldTime } = this
    this.heldPlace = this.heldTime = false
    return { heldPlace, heldTime }
  }

  refuse(beyond: OutsideField['beyond'], latitude: number, longitude: number, time: number): never {
    throw new OutsideField(beyond, { latitude, longitude, time }, this.file.coverage)
  }

  /** Finds the valid times around `time`; returns the share of the later one. */
  private locateTime(latitude: number, longitude: number, time: number): number {
    const { times, lastTime } = this
    if (!(time >= times[0] && time <= times[lastTime])) {
      if (this.outside === 'refuse') this.refuse('times', latitude, longitude, time)
      this.heldTime = true
      this.setTime(time < times[0] ? 0 : Math.max(0, lastTime - 1))
      return time < times[0] || lastTime === 0 ? 0 : 1
    }
    let index = this.timeIndex
    if (index < 0 || time < times[index] || time > times[index + 1] || index >= lastTime) {
      index = 0
      while (index < lastTime - 1 && times[index + 1] <= time) index++
      this.setTime(index)
    }
    return lastTime === 0 ? 0 : (time - times[index]) / (times[index + 1] - times[index])
  }

  private setTime(index: number): void {
    if (index === this.timeIndex) return
    this.timeIndex = index
    this.tileKey = -1
  }

  private load(tileKey: number, tileColumn: number, tileRow: number): void {
    const { timeIndex } = this
    this.early = this.tile(timeIndex, tileKey, tileColumn, tileRow)
    this.late =
      timeIndex < this.lastTime
        ? this.tile(timeIndex + 1, tileKey, tileColumn, tileRow)
        : this.early
    this.tileKey = tileKey
  }

  private tile(time: number, tileKey: number, tileColumn: number, tileRow: number): Float32Array {
    const { cached, file } = this
    const key = time * file.tiling.across * file.tiling.down + tileKey
    let tile = cached.get(key)
    if (tile === undefined) tile = file.readTile(time, tileColumn, tileRow)
    else cached.delete(key)
    cached.set(key, tile) // a Map keeps the order of insertion, so the first is the longest unused
    if (cached.size > MOST_TILES) {
      const [oldest] = cached.keys()
      cached.delete(oldest)
    }
    return tile
  }
}
