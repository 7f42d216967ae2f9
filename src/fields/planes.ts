import { fieldSections, type FieldSections } from './sections.ts'
import { GribError, UnsupportedGrib } from './gribError.ts'
import { type GribMessage, gribMessages, type MessageLimits } from './gribMessages.ts'
import { type Grid } from './grid.ts'
import { type Product, readProduct } from './product.ts'
import { readGrid } from './readGrid.ts'
import { readValues } from './values.ts'

/** One quantity at one pressure and time over the whole grid. */
export interface Plane extends Product {
  grid: Grid
  /** Section 3 as it stood in the message: two planes are on the same grid where these are equal */
  gridSection: Uint8Array
  /** In SI and in rows; NaN where missing */
  values: Float64Array
}

/** Messages passed over for one reason. */
export interface Skipped {
  reason: string
  messages: number
}

/** Distinct reasons that are kept apart; a hostile file could have as many as messages. */
const MOST_REASONS = 200

/** Counts what was passed over, by reason. */
export class SkippedMessages {
  private readonly counts = new Map<string, number>()

  add(reason: string): void {
    const known = this.counts.has(reason) || this.counts.size < MOST_REASONS
    const key = known ? reason : 'other reasons'
    this.counts.set(key, (this.counts.get(key) ?? 0) + 1)
  }

  list(): Skipped[] {
    return Array.from(this.counts, ([reason, messages]) => ({ reason, messages }))
  }
}

/**
 * Reads a GRIB file from its bytes, one message at a time, and yields every plane of air in it. What
 * is not such a plane is added to `skipped`.
 * @throws GribError where the file is truncated, damaged or no GRIB file.
 */
export async function* gribPlanes(
  chunks: AsyncIterable<Uint8Array>,
  skipped: SkippedMessages,
  limits?: MessageLimits,
): AsyncGenerator<Plane> {
  for await (const message of gribMessages(chunks, limits)) {
    if (message.edition !== 2) {
      skipped.add(`GRIB edition ${message.edition}`)
      continue
    }
    const fields = fieldSections(message.bytes)
    while (true) {
      const sections = located(message, () => fields.next())
      if (sections.done) break
      try {
        yield await readPlane(sections.value)
      } catch (error) {
        if (error instanceof UnsupportedGrib) skipped.add(error.message)
        else throw atMessage(message, error)
      }
    }
  }
}

async function readPlane(sections: FieldSections): Promise<Plane> {
  const product = readProduct(sections)
  const grid = readGrid(sections.grid)
  const values = await readValues(sections, grid)
  if (product.unit !== 1) {
    for (let point = 0; point < values.length; point++) values[point] *= product.unit
  }
  return { ...product, grid, gridSection: sections.grid.from(1), values }
}

function located<T>(message: GribMessage, read: () => T): T {
  try {
    return read()
  } catch (error) {
    throw atMessage(message, error)
  }
}

/** The same error, saying which message it is about. */
function atMessage(message: GribMessage, error: unknown): unknown {
  if (!(error instanceof GribError)) return error
  return new GribError(error.problem, `the message at byte ${message.offset}: ${error.message}`)
}
