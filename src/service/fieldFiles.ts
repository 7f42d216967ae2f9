import { createHash } from 'node:crypto'
import { createWriteStream, existsSync, readdirSync, renameSync, rmSync } from 'node:fs'
import { mkdir, rename, rm } from 'node:fs/promises'
import { join } from 'node:path'
import { type Readable, Transform } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { FieldDecoder } from '../fields/fieldDecoder.ts'
import { FieldFile } from '../fields/fieldFile.ts'
import { type Fields } from '../store/fields.ts'
import { Problem } from './problems.ts'

/** Largest upload, bytes. */
export const FIELD_UPLOAD_LIMIT = 2 * 1024 ** 3

/** Uploads under way at once; more are sent away with 503. */
const MOST_UPLOADS = 4

/** Ends of the names of files: uploads, fields that stand in no row yet, fields. Only the last are kept. */
const UPLOAD = '.upload.part'
const DECODED = '.decoded.part'
const FIELD = '.field'

/**
 * The folder of the forecasts' values, one file each. A file gets its lasting name after its row is in the
 * database: what an ended program left half done is finished or removed at the next start.
 */
export class FieldFiles {
  private readonly folder: string
  private readonly limit: number
  private readonly decoder = new FieldDecoder()
  private uploads = 0

  constructor(folder: string, fields: Fields, limit = FIELD_UPLOAD_LIMIT) {
    this.folder = folder
    this.limit = limit
    if (!existsSync(folder)) return
    for (const name of readdirSync(folder)) {
      if (!name.endsWith('.part')) continue
      const id = name.slice(0, name.indexOf('.'))
      if (name.endsWith(DECODED) && fields.get(id)) {
        renameSync(join(folder, name), this.path(id))
      } else rmSync(join(folder, name), { force: true })
    }
  }

  /** Where the values of a field stand. */
  path(id: string): string {
    return join(this.folder, `${id}${FIELD}`)
  }

  /**
   * Takes an upload to the disk, never holding more of it than a chunk; resolves to the SHA-256 of its bytes.
   * @throws Problem 413, 400 where it is cut off, 503, or 507
   */
  async receive(id: string, body: Readable): Promise<Buffer> {
    if (this.uploads >= MOST_UPLOADS) {
      throw new Problem(503, `${MOST_UPLOADS} uploads are under way: try again in a minute.`)
    }
    this.uploads++
    try {
      await mkdir(this.folder, { recursive: true })
      const hash = createHash('sha256')
      const measure = measured(this.limit, hash)
      await pipeline(body, measure, createWriteStream(this.part(id, UPLOAD)))
      return hash.digest()
    } catch (error) {
      await this.discard(id)
      throw uploadProblem(error)
    } finally {
      this.uploads--
    }
  }

  /** Decodes a received upload and lets `read` look at the field. @throws GribError */
  async decode<Result>(id: string, read: (field: FieldFile) => Result): Promise<Result> {
    try {
      await this.decoder.decode(this.part(id, UPLOAD), this.part(id, DECODED))
      const field = new FieldFile(this.part(id, DECODED))
      try {
        return read(field)
      } finally {
        field.close()
      }
    } catch (error) {
      throw isDiskFull(error) ? diskFull() : error
    } finally {
      await rm(this.part(id, UPLOAD), { force: true })
    }
  }

  /** Gives a decoded field whose row is stored its lasting name. */
  async keep(id: string): Promise<void> {
    await rename(this.part(id, DECODED), this.path(id))
  }

  /** Removes what was received or decoded and is not kept. */
  async discard(id: string): Promise<void> {
    await rm(this.part(id, UPLOAD), { force: true })
    await rm(this.part(id, DECODED), { force: true })
  }

  /** Removes a field. */
  async remove(id: string): Promise<void> {
    await rm(this.path(id), { force: true })
  }

  close(): Promise<void> {
    return this.decoder.close()
  }

  private part(id: string, end: string): string {
    return join(this.folder, `${id}${end}`)
  }
}

/** Passes chunks on, hashing them, until they are more than `limit` bytes. */
function measured(limit: number, hash: ReturnType<typeof createHash>): Transform {
  let bytes = 0
  return new Transform({
    transform(chunk: Buffer, _encoding, done) {
      bytes += chunk.length
      if (bytes > limit) {
        done(new Problem(413, `A forecast may be ${limit} bytes long at most.`))
        return
      }
      hash.update(chunk)
      done(null, chunk)
    },
  })
}

function uploadProblem(error: unknown): unknown {
  if (error instanceof Problem) return error
  if (isDiskFull(error)) return diskFull()
  const { code } = error as NodeJS.ErrnoException
  if (code === 'ERR_STREAM_PREMATURE_CLOSE' || code === 'ECONNRESET') {
    return new Problem(400, 'The upload was cut off.')
  }
  return error
}

function isDiskFull(error: unknown): boolean {
  return (error as NodeJS.ErrnoException).code === 'ENOSPC'
}

function diskFull(): Problem {
  return new Problem(507, 'There is no room on the disk for this forecast: delete others first.')
}
