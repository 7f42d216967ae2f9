import { createReadStream } from 'node:fs'
import { type FieldHeader } from './fieldHeader.ts'
import { storeField } from './fieldWriter.ts'
import { GribError, type GribProblem } from './gribError.ts'

/** What runs in the decoding thread. */

export interface DecodingOrder {
  /** A file of GRIB messages */
  upload: string
  /** Where the field is stored */
  path: string
}

/** An error does not keep its class between threads. */
export interface Unreadable {
  problem: GribProblem
  message: string
}

/** Reads an uploaded file and stores the field in it. */
export async function decode({ upload, path }: DecodingOrder): Promise<FieldHeader | Unreadable> {
  try {
    return await storeField(createReadStream(upload, { highWaterMark: 2 ** 20 }), path)
  } catch (error) {
    if (error instanceof GribError) return { problem: error.problem, message: error.message }
    throw error
  }
}
