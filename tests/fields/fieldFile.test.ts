import {
  copyFileSync,
  readdirSync,
  readFileSync,
  statSync,
  truncateSync,
  writeFileSync,
} from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { FieldFile, FieldFileError } from '../../src/fields/fieldFile.ts'
import { chooseLevels, type StoredPlane } from '../../src/fields/fieldHeader.ts'
import { DEFAULT_FIELD_LIMITS, storeField } from '../../src/fields/fieldWriter.ts'
import { GribError } from '../../src/fields/gribError.ts'
import { LatLonGrid } from '../../src/fields/latLonGrid.ts'
import { type Quantity } from '../../src/fields/product.ts'
import { cutIntoTiles, TILE_CELLS, TILE_POINTS, TILE_SIDE, tiling } from '../../src/fields/tiles.ts'
import { fixtureBytes, inChunks } from './fixture.ts'
import { fieldFolder } from './storedField.ts'
import { CODES, latLonSection, syntheticMessage } from './synthetic.ts'

const fields = fieldFolder()

describe('storing a field', () => {
  it('leaves nothing behind where the file is cut off, damaged or not air to fly in', async () => {
    const region = fixtureBytes('gfs-region')
    const onlyHeights = fixtureBytes('packings')
    const path = fields.path('never')
    for (const [bytes, problem] of [
      [region.subarray(0, region.length - 10), 'truncated'],
      [Buffer.concat([region.subarray(0, 50_000), Buffer.alloc(100_000)]), 'damaged'],
      [onlyHeights, 'incomplete'],
      [Buffer.from('nothing of the kind'), 'not-grib'],
    ] as const) {
      const stored = storeField(inChunks(bytes), path)
      await expect(stored).rejects.toBeInstanceOf(GribError)
      await expect(stored).rejects.toMatchObject({ problem })
    }
    expect(readdirSync(fields.folder)).toEqual([])
  })

  it('leaves nothing behind where its source breaks off', async () => {
    async function* broken(): AsyncGenerator<Uint8Array> {
      yield fixtureBytes('gfs-region').subarray(0, 60_000)
      await Promise.resolve()
      throw new Error('the line went dead')
    }
    await expect(storeField(broken(), fields.path('never'))).rejects.toThrow('the line went dead')
    expect(readdirSync(fields.folder)).toEqual([])
  })

  it('stops at its limits', async () => {
    const limits = { ...DEFAULT_FIELD_LIMITS, decodedBytes: 10_000 }
    const stored = storeField(inChunks(fixtureBytes('gfs-region')), fields.path('never'), limits)
    await expect(stored).rejects.toMatchObject({ problem: 'too-large' })
  })

  it('refuses values that no air has', async () => {
    const grid = latLonSection(3, 3, 10, 0, 5)
    const hot = syntheticMessage(grid, {
      code: CODES.temperature,
      pressure: 50_000,
      hours: 0,
      values: [250, 250, 250, 250, 2000, 250, 250, 250, 250],
    })
    await expect(storeField(inChunks(hot), fields.path('never'))).rejects.toMatchObject({
      problem: 'damaged',
    })
  })

  it('replaces an older file of the same name as a whole', async () => {
    writeFileSync(fields.path('same'), 'older')
    const file = await fields.store(fixtureBytes('gfs-region'), 'same')
    expect(file.header.levels).toHaveLength(26)
  })

  it('names planes that are on another grid, from another centre, or given twice', async () => {
    const region = fixtureBytes('gfs-region')
    const first = region.subarray(0, Number(region.readBigUInt64BE(8)))
    const foreign = Buffer.from(first)
    foreign[16 + 6] = 98
    const globe = fixtureBytes('packings-globe')
    const file = await fields.store(
      Buffer.concat([region, first, foreign, globe.subarray(0, Number(globe.readBigUInt64BE(8)))]),
      'mixed',
    )
    expect(file.header.skipped).toEqual([
      { reason: 'geopotentialHeight: given twice for a level and time', messages: 1 },
      { reason: 'geopotentialHeight: from another centre than the first', messages: 1 },
      { reason: 'geopotentialHeight: on another grid than the first', messages: 1 },
    ])
  })
})

describe('a file that is not a whole field', () => {
  it('is refused when it is opened', async () => {
    const whole = fields.path('whole')
    await storeField(inChunks(fixtureBytes('gfs-region')), whole)
    const cut = fields.path('cut')
    for (const size of [0, 10, 40, 100_000, statSync(whole).size - 1]) {
      copyFileSync(whole, cut)
      truncateSync(cut, size)
      expect(() => new FieldFile(cut)).toThrow(FieldFileError)
    }
    writeFileSync(cut, Buffer.concat([Buffer.from('x'), readFileSync(whole)]))
    expect(() => new FieldFile(cut)).toThrow(FieldFileError)
  })
})

describe('levels and times', () => {
  const plane = (quantity: Quantity, pressure: number, validTime: number): StoredPlane => ({
    quantity,
    pressure,
    validTime,
    referenceTime: 0,
    position: pressure + validTime,
    least: 0,
    greatest: 1,
  })
  const needed = ['geopotentialHeight', 'temperature', 'windEast', 'windNorth'] as const
  const whole = (pressures: number[], times: number[]) =>
    times.flatMap((time) =>
      pressures.flatMap((pressure) => needed.map((quantity) => plane(quantity, pressure, time))),
    )

  it('are those that have height, temperature and wind throughout', () => {
    const choice = chooseLevels([
      ...whole([1000, 500, 850], [0, 3]),
      ...whole([1000, 500], [6]), // a time without one of the levels
      plane('windEast', 700, 0), // a level with only a wind
      plane('relativeHumidity', 850, 0),
      plane('relativeHumidity', 850, 3),
      plane('relativeHumidity', 500, 0), // humidity at one time only
    ])
    expect(choice).toMatchObject({
      levels: [1000, 850, 500],
      validTimes: [0, 3],
      humidity: { quantity: 'relativeHumidity', levels: [850] },
    })
    expect(choice?.planes.windNorth?.[1].map(({ position }) => position)).toEqual([1003, 853, 503])
    expect(choice?.unused).toHaveLength(8 + 1 + 1)
  })

  it('prefer many times to a level more', () => {
    expect(chooseLevels([...whole([1000, 500], [0, 1, 2, 3]), ...whole([700], [0])])).toMatchObject(
      {
        levels: [1000, 500],
        validTimes: [0, 1, 2, 3],
      },
    )
  })

  it('are none where no two levels are complete', () => {
    expect(chooseLevels(whole([1000], [0, 1]))).toBeNull()
    expect(chooseLevels([])).toBeNull()
  })
})

it('cuts any grid into tiles that hold every cell with its four corners', () => {
  const size = fc.integer({ min: 2, max: 60 })
  fc.assert(
    fc.property(size, size, fc.boolean(), (columns, rows, wraps) => {
      const step = (2 * Math.PI) / columns
      const grid = new LatLonGrid(
        columns,
        rows,
        { eastward: true, northward: true, columnsFirst: false, alternating: false },
        { latitude: -1, longitude: 0 },
        wraps ? step : step / 2,
        0.01,
      )
      expect(grid.wraps).toBe(wraps)
      const values = Float64Array.from({ length: columns * rows }, (_, point) => point)
      const tiles = cutIntoTiles(values, grid)
      const { across } = tiling(grid)
      const last = wraps ? columns : columns - 1
      for (let row = 0; row < rows - 1; row++) {
        for (let column = 0; column < last; column++) {
          const tile = Math.floor(row / TILE_CELLS) * across + Math.floor(column / TILE_CELLS)
          const at = tile * TILE_POINTS + (row % TILE_CELLS) * TILE_SIDE + (column % TILE_CELLS)
          const corners = [
            tiles[at],
            tiles[at + 1],
            tiles[at + TILE_SIDE],
            tiles[at + TILE_SIDE + 1],
          ]
          const here = row * columns + column
          const next = row * columns + ((column + 1) % columns)
          if (corners.join() !== [here, next, here + columns, next + columns].join()) {
            throw new Error(`cell ${column} ${row} of ${columns} by ${rows}: ${corners.join()}`)
          }
        }
      }
    }),
    { numRuns: 60 },
  )
})
