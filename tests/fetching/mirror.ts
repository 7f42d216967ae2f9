import { createServer, type IncomingMessage, type ServerResponse } from 'node:http'
import { readFileSync } from 'node:fs'
import { type AddressInfo } from 'node:net'
import { setTimeout } from 'node:timers/promises'
import { onTestFinished } from 'vitest'

/** Ten messages of a real global forecast; its source stands in tests/fixtures/fields/README.md. */
export const FORECAST = readFileSync(
  new URL('../fixtures/fields/gfs-500-250hPa.grib2', import.meta.url),
)

/** 2011-01-10 12 UTC, s since 1970 UTC. */
export const RUN = 1_294_660_800
export const STEP = 120

/** Offsets and fields as the reference decoder lists them (ecCodes 2.28, grib_ls), in wgrib2's form. */
export const INDEX = `1:0:d=2011011012:HGT:250 mb:120 hour fcst:
2:16896:d=2011011012:TMP:250 mb:120 hour fcst:
3:23906:d=2011011012:RH:250 mb:120 hour fcst:
4:32076:d=2011011012:UGRD:250 mb:120 hour fcst:
5:41867:d=2011011012:VGRD:250 mb:120 hour fcst:
6:51882:d=2011011012:HGT:500 mb:120 hour fcst:
7:68143:d=2011011012:TMP:500 mb:120 hour fcst:
8:75327:d=2011011012:RH:500 mb:120 hour fcst:
9:84224:d=2011011012:UGRD:500 mb:120 hour fcst:
10:98367:d=2011011012:VGRD:500 mb:120 hour fcst:
`

export interface Request {
  path: string
  range: string | undefined
  ifRange: string | undefined
}

/** What a mirror does otherwise than it should; called for each request, true where it has answered. */
export type Mischief = (request: Request, response: ServerResponse, count: number) => boolean

export interface MirrorOptions {
  file?: Buffer
  index?: string
  etag?: string | null
  ranges?: boolean
  mischief?: Mischief
}

/** A local server that serves a forecast file, and its index beside it, under every path. */
export async function startMirror(options: MirrorOptions = {}) {
  const requests: Request[] = []
  const mirror = {
    file: FORECAST,
    index: INDEX,
    etag: '"one"' as string | null,
    ranges: true,
    ...options,
  }
  const server = createServer((incoming: IncomingMessage, response) => {
    const { range, 'if-range': ifRange } = incoming.headers
    const request = { path: incoming.url ?? '', range, ifRange: ifRange as string | undefined }
    requests.push(request)
    if (mirror.mischief?.(request, response, requests.length)) return
    if (request.path.endsWith('.idx')) {
      response.end(mirror.index)
      return
    }
    serveFile(response, request, mirror)
  })
  await new Promise<void>((listening) => server.listen(0, '127.0.0.1', listening))
  onTestFinished(() => {
    server.closeAllConnections()
    server.close()
  })
  const address = `http://127.0.0.1:${(server.address() as AddressInfo).port}`
  return { requests, mirror, address }
}

type Served = Required<Omit<MirrorOptions, 'mischief'>>

/** Which bytes a request is to get (RFC 9110, section 14), and the head of the answer. */
function head(request: Request, { file, etag, ranges }: Served) {
  const headers: Record<string, string | number> = etag === null ? {} : { etag }
  const asked = /^bytes=(\d+)-(\d*)$/.exec(request.range ?? '')
  const changed = request.ifRange !== undefined && request.ifRange !== etag
  if (!ranges || !asked || changed) {
    return { status: 200, headers: { ...headers, 'content-length': file.length }, bytes: file }
  }
  const start = Number(asked[1])
  const last = Math.min(asked[2] ? Number(asked[2]) : Infinity, file.length - 1)
  const bytes = file.subarray(start, last + 1)
  const contentRange = `bytes ${start}-${last}/${file.length}`
  return {
    status: 206,
    headers: { ...headers, 'content-range': contentRange, 'content-length': bytes.length },
    bytes,
  }
}

export function serveFile(response: ServerResponse, request: Request, served: Served): void {
  const { status, headers, bytes } = head(request, served)
  response.writeHead(status, headers).end(bytes)
}

/** Serves as it should, but breaks the connection off after so many bytes. */
export function breakOff(
  response: ServerResponse,
  request: Request,
  served: Served,
  after: number,
): void {
  const { status, headers, bytes } = head(request, served)
  response.writeHead(status, headers)
  response.write(bytes.subarray(0, after), () => response.destroy())
}

/** Serves a little at a time, with so many ms between. */
export async function serveSlowly(
  response: ServerResponse,
  request: Request,
  served: Served,
  pause: number,
): Promise<void> {
  const { status, headers, bytes } = head(request, served)
  response.writeHead(status, headers)
  for (let at = 0; at < bytes.length; at += 8192) {
    response.write(bytes.subarray(at, at + 8192))
    await setTimeout(pause)
  }
  response.end()
}
