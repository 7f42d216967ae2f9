import { createReadStream, existsSync } from 'node:fs'
import { mkdir, open, rename, rm } from 'node:fs/promises'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { GribError } from '../fields/gribError.ts'
import { gribMessages } from '../fields/gribMessages.ts'
import { downloadRange, downloadText, type Asking } from './download.ts'
import { FetchError } from './fetchError.ts'
import { wantedRanges, type WantedRanges } from './fileIndex.ts'
import { sourceUrl, type SourceSettings } from './sourceSettings.ts'

/** A file that comes damaged, or changes underway, is begun anew so often. */
const BEGINNINGS = 3

/**
 * Fetches every step of a run into `folder`, one file a step; answers with the files in order. A step is
 * there under its name only when it is whole, so that a later attempt goes on with the next.
 * `runTime` in s since 1970 UTC.
 * @throws FetchError, with which nothing of the run is to be used
 */
export async function fetchRun(
  source: SourceSettings,
  runTime: number,
  folder: string,
  asking: Asking,
): Promise<string[]> {
  await mkdir(folder, { recursive: true })
  const files: string[] = []
  for (const step of source.stepHours) {
    const file = join(folder, `${String(step).padStart(4, '0')}.grib2`)
    if (!existsSync(file)) await fetchStep(source, runTime, step, file, asking)
    files.push(file)
  }
  return files
}

/** The bytes of files, one after the other. */
export async function* bytesOf(files: readonly string[]): AsyncGenerator<Uint8Array> {
  for (const file of files) {
    for await (const chunk of createReadStream(file)) yield chunk as Uint8Array
  }
}

async function fetchStep(
  source: SourceSettings,
  runTime: number,
  step: number,
  file: string,
  asking: Asking,
): Promise<void> {
  const part = `${file}.part`
  for (let beginning = 1; ; beginning++) {
    try {
      const messages = await download(source, runTime, step, part, asking)
      await checkMessages(part, messages)
      await rename(part, file)
      return
    } catch (error) {
      await rm(part, { force: true })
      const anew = error instanceof FetchError && error.remedy === 'anew'
      if (!anew || beginning >= BEGINNINGS) throw error
      await sleep(asking.patience.firstDelay, undefined, { signal: asking.signal })
    }
  }
}

/** Downloads what is wanted of a step; answers with how many messages that must be, null where unknown. */
async function download(
  source: SourceSettings,
  runTime: number,
  step: number,
  part: string,
  asking: Asking,
): Promise<number | null> {
  const url = sourceUrl(source, runTime, step)
  const { ranges, messages }: WantedRanges | { ranges: WantedRanges['ranges']; messages: null } =
    source.index
      ? wantedRanges(
          await downloadText(url + source.index.suffix, asking),
          source.index.wanted,
          runTime,
        )
      : { ranges: [{ start: 0, end: null }], messages: null }
  const handle = await open(part, 'w')
  try {
    let length = 0
    for (const range of ranges) length += await downloadRange(url, range, handle, length, asking)
    await handle.sync()
    return messages
  } finally {
    await handle.close()
  }
}

/** Every message must stand whole from its "GRIB" to its "7777", and none may be missing. */
async function checkMessages(part: string, expected: number | null): Promise<void> {
  let found = 0
  let end = 0
  try {
    for await (const { bytes, edition, offset } of gribMessages(createReadStream(part))) {
      if (expected !== null && offset !== end) {
        throw new FetchError(`the index does not fit the file: no message at byte ${end}`, 'anew')
      }
      end = offset + bytes.length
      if (edition !== 2) {
        throw new FetchError(`the message at byte ${offset} is of edition ${edition}`, 'anew')
      }
      found++
    }
  } catch (error) {
    if (error instanceof GribError) throw new FetchError(error.message, 'anew', error)
    throw error
  }
  if (expected !== null && found !== expected) {
    throw new FetchError(`${found} messages came where ${expected} are wanted`, 'anew')
  }
}
