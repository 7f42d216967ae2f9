import { type FileHandle } from 'node:fs/promises'
import { setTimeout as sleep } from 'node:timers/promises'
import { FetchError } from './fetchError.ts'
import { type ByteRange } from './fileIndex.ts'

/** How patiently a source is asked. Times in ms. */
export interface Patience {
  /** Attempts in a row that bring nothing */
  attempts: number
  /** Before the second attempt; twice as long before each that follows */
  firstDelay: number
  /** The longest that nothing may come */
  stall: number
}

export const PATIENCE: Patience = { attempts: 6, firstDelay: 1000, stall: 60_000 }

/** An index longer than this is none, bytes. */
const LONGEST_INDEX = 5_000_000

/** Attempts at one stretch of a file, even where each brings a little. */
const MOST_ATTEMPTS = 200

/** What all requests of one fetch share. */
export interface Asking {
  patience: Patience
  signal: AbortSignal
  /** Called with the length of everything that arrives; throws where that is too much */
  spend: (bytes: number) => void
}

/** Fetches a short text. @throws FetchError */
export async function downloadText(url: string, asking: Asking): Promise<string> {
  for (let attempt = 1; ; attempt++) {
    try {
      const parts: Uint8Array[] = []
      let length = 0
      const { response, chunks } = await open(url, {}, asking)
      if (response.status !== 200) throw refused(url, response.status)
      for await (const chunk of chunks) {
        asking.spend(chunk.length)
        length += chunk.length
        if (length > LONGEST_INDEX) throw new FetchError(`${url} is too long for an index`, 'none')
        parts.push(chunk)
      }
      return Buffer.concat(parts).toString('utf8')
    } catch (error) {
      await pause(error, attempt, asking)
    }
  }
}

/**
 * Fetches a stretch of a file and writes it at `position`; answers with its length. What breaks off is
 * gone on with where it stopped, as long as the file is the same (RFC 9110, Range and If-Range).
 * @throws FetchError
 */
export async function downloadRange(
  url: string,
  range: ByteRange,
  file: FileHandle,
  position: number,
  asking: Asking,
): Promise<number> {
  const whole = range.start === 0 && range.end === null
  let got = 0
  let validator: string | null = null
  let fruitless = 0
  for (let attempt = 1; attempt <= MOST_ATTEMPTS; attempt++) {
    const before = got
    try {
      // Without a validator nobody can say that the rest belongs to the beginning.
      if (validator === null) got = 0
      const headers: Record<string, string> = {}
      if (!whole || got > 0) {
        headers.range = `bytes=${range.start + got}-${range.end === null ? '' : range.end - 1}`
      }
      if (got > 0 && validator !== null) headers['if-range'] = validator
      const { response, chunks } = await open(url, headers, asking)
      if (response.status === 200 && whole) {
        got = 0 // from the beginning: the first answer, or the file has changed
      } else if (response.status !== 206) {
        throw response.status === 200
          ? new FetchError(`${url} is served whole only, or has changed`, got > 0 ? 'anew' : 'none')
          : refused(url, response.status)
      } else checkRange(response, range.start + got, range.end)
      validator = strongValidator(response)
      for await (const chunk of chunks) {
        asking.spend(chunk.length)
        await file.write(chunk, 0, chunk.length, position + got)
        got += chunk.length
        if (range.end !== null && got > range.end - range.start) {
          throw new FetchError(`${url} answers with more than it was asked for`, 'none')
        }
      }
      if (range.end !== null && got < range.end - range.start) {
        throw new FetchError(`${url} breaks off after ${got} bytes`, 'again')
      }
      await file.truncate(position + got) // an earlier, longer beginning may stand behind it
      return got
    } catch (error) {
      fruitless = got > before ? 1 : fruitless + 1
      await pause(error, fruitless, asking)
    }
  }
  throw new FetchError(`${url} broke off ${MOST_ATTEMPTS} times`, 'none')
}

/** Asks, and reads the answer as long as something comes. */
async function open(url: string, headers: Record<string, string>, { patience, signal }: Asking) {
  const stalled = new AbortController()
  const timer = setTimeout(() => {
    stalled.abort(new FetchError(`${url} sends nothing for ${patience.stall} ms`, 'again'))
  }, patience.stall)
  const both = AbortSignal.any([signal, stalled.signal])
  try {
    const response = await fetch(url, {
      headers: { 'accept-encoding': 'identity', 'user-agent': 'Driftbook', ...headers },
      signal: both,
    })
    return { response, chunks: chunksOf(response, timer) }
  } catch (error) {
    clearTimeout(timer)
    throw error
  }
}

async function* chunksOf(response: Response, timer: NodeJS.Timeout): AsyncGenerator<Uint8Array> {
  try {
    for await (const chunk of response.body ?? []) {
      timer.refresh()
      yield chunk as Uint8Array
    }
  } finally {
    clearTimeout(timer)
  }
}

/** Only a strong validator says that two answers are parts of one file (RFC 9110, section 13.1.5). */
function strongValidator({ headers }: Response): string | null {
  const tag = headers.get('etag')
  return tag !== null && !tag.startsWith('W/') ? tag : null
}

function checkRange(response: Response, start: number, end: number | null): void {
  const found = /^bytes (\d+)-(\d+)\//.exec(response.headers.get('content-range') ?? '')
  if (Number(found?.[1]) === start && (end === null || Number(found?.[2]) === end - 1)) return
  throw new FetchError(`${response.url} answers with another range than it was asked for`, 'again')
}

function refused(url: string, status: number): FetchError {
  const passing = status >= 500 || status === 429 || status === 408
  return new FetchError(`${url} answers with status ${status}`, passing ? 'again' : 'none')
}

/** Waits before the next attempt. @throws the error where there is to be none */
async function pause(error: unknown, attempt: number, { patience, signal }: Asking): Promise<void> {
  signal.throwIfAborted()
  const failure =
    error instanceof FetchError
      ? error
      : new FetchError(describe(error), isNetwork(error) ? 'again' : 'none', error)
  if (failure.remedy !== 'again' || attempt >= patience.attempts) throw failure
  await sleep(patience.firstDelay * 2 ** (attempt - 1), undefined, { signal })
}

/** What fetch throws where a connection fails or breaks off is a TypeError. */
function isNetwork(error: unknown): boolean {
  return error instanceof TypeError
}

function describe(error: unknown): string {
  if (!(error instanceof Error)) return String(error)
  return error.cause instanceof Error ? error.cause.message : error.message
}
