import { readFileSync } from 'node:fs'
import { gribPlanes, SkippedMessages, type Plane } from '../../src/fields/planes.ts'

export function fixtureBytes(name: string): Buffer {
  return readFileSync(new URL(`../fixtures/fields/${name}.grib2`, import.meta.url))
}

/** What the reference decoder gave for a fixture; see makeFixtures.ts for its form. */
export function fixtureExpected(name: string): unknown {
  return JSON.parse(
    readFileSync(new URL(`../fixtures/fields/${name}.json`, import.meta.url), 'utf8'),
  )
}

/** Bytes as a stream of chunks of a given size. */
export async function* inChunks(bytes: Uint8Array, size = 65_536): AsyncGenerator<Uint8Array> {
  for (let at = 0; at < bytes.length; at += size) {
    yield bytes.subarray(at, at + size)
    await Promise.resolve()
  }
}

export async function readPlanes(
  bytes: Uint8Array,
  chunkSize?: number,
): Promise<{ planes: Plane[]; skipped: ReturnType<SkippedMessages['list']> }> {
  const skipped = new SkippedMessages()
  const planes: Plane[] = []
  for await (const plane of gribPlanes(inChunks(bytes, chunkSize), skipped)) planes.push(plane)
  return { planes, skipped: skipped.list() }
}

/** The value of a plane, in the unit of the code tables, at the n-th point in the order of the message. */
export function inMessageOrder({ grid, values, unit }: Plane, index: number): number {
  const { columns, rows } = grid
  const { columnsFirst, alternating } = grid.scanning
  let column = columnsFirst ? Math.floor(index / rows) : index % columns
  let row = columnsFirst ? index % rows : Math.floor(index / columns)
  if (alternating && columnsFirst && column % 2 === 1) row = rows - 1 - row
  if (alternating && !columnsFirst && row % 2 === 1) column = columns - 1 - column
  return values[row * columns + column] / unit
}
