import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { describe, expect, it, onTestFinished } from 'vitest'
import { type Asking } from '../../src/fetching/download.ts'
import { fetchRun } from '../../src/fetching/fetchRun.ts'
import { type SourceSettings } from '../../src/fetching/sourceSettings.ts'
import {
  breakOff,
  FORECAST,
  INDEX,
  RUN,
  serveFile,
  serveSlowly,
  startMirror,
  STEP,
} from './mirror.ts'

const WIND = [{ variables: ['HGT', 'UGRD', 'VGRD'], levels: ['500 mb'] }]
/** The messages of WIND by the offsets of the index: two stretches of the file. */
const WIND_BYTES = Buffer.concat([FORECAST.subarray(51_882, 68_143), FORECAST.subarray(84_224)])

function source(address: string, more: Partial<SourceSettings> = {}): SourceSettings {
  return {
    name: 'mirror',
    url: `${address}/{runYear}{runMonth}{runDay}/{runHour}/f{step3}.grib2`,
    region: '',
    runs: '0 0,12 * * *',
    availableAfterS: 0,
    stepHours: [STEP],
    keepRuns: 2,
    diskBudgetMB: 10,
    lookAgainAfterS: 600,
    ...more,
  }
}

function freshFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'driftbook-fetch-'))
  onTestFinished(() => {
    rmSync(folder, { recursive: true })
  })
  return folder
}

function asking(more: Partial<Asking> = {}): Asking {
  return {
    patience: { attempts: 4, firstDelay: 5, stall: 300 },
    signal: new AbortController().signal,
    spend: () => undefined,
    ...more,
  }
}

const index = { suffix: '.idx', wanted: WIND }

describe('a run is fetched', () => {
  it('by the ranges of its index, and nothing else of the file', async () => {
    const { address, requests } = await startMirror()
    const [file] = await fetchRun(source(address, { index }), RUN, freshFolder(), asking())
    expect(readFileSync(file).equals(WIND_BYTES)).toBe(true)
    expect(requests.map(({ path, range }) => [path, range])).toEqual([
      ['/20110110/12/f120.grib2.idx', undefined],
      ['/20110110/12/f120.grib2', 'bytes=51882-68142'],
      ['/20110110/12/f120.grib2', 'bytes=84224-'],
    ])
  })

  it('whole where there is no index', async () => {
    const { address, requests } = await startMirror({ ranges: false })
    const [file] = await fetchRun(source(address), RUN, freshFolder(), asking())
    expect(readFileSync(file).equals(FORECAST)).toBe(true)
    expect(requests).toHaveLength(1)
  })

  it('however slowly it comes', async () => {
    const { address, mirror } = await startMirror()
    Object.assign(mirror, {
      mischief: (request: Parameters<typeof serveSlowly>[1], response: never) => {
        void serveSlowly(response, request, mirror, 60) // 14 pieces: longer than a stall in all
        return true
      },
    })
    const [file] = await fetchRun(source(address), RUN, freshFolder(), asking())
    expect(readFileSync(file).equals(FORECAST)).toBe(true)
  })

  it.each([
    ['whole', undefined, FORECAST],
    ['in ranges', index, WIND_BYTES],
  ])('%s although the connection breaks off again and again', async (_how, chosen, expected) => {
    const { address, mirror, requests } = await startMirror()
    mirror.mischief = (request, response) => {
      if (request.path.endsWith('.idx') || requests.length % 3 === 0) return false
      breakOff(response, request, mirror, 9000)
      return true
    }
    const settings = source(address, chosen ? { index: chosen } : {})
    const [file] = await fetchRun(settings, RUN, freshFolder(), asking())
    expect(readFileSync(file).equals(expected)).toBe(true)
    const resumed = requests.filter(({ ifRange }) => ifRange === '"one"')
    expect(resumed.length).toBeGreaterThan(0)
  })

  it('from the beginning where nothing tells that the rest belongs to it', async () => {
    const { address, mirror, requests } = await startMirror({ etag: null })
    mirror.mischief = (request, response, count) => {
      if (count > 1) return false
      breakOff(response, request, mirror, 9000)
      return true
    }
    const [file] = await fetchRun(source(address), RUN, freshFolder(), asking())
    expect(readFileSync(file).equals(FORECAST)).toBe(true)
    expect(requests.map(({ range }) => range)).toEqual([undefined, undefined])
  })

  it.each([
    ['whole', undefined],
    ['in ranges', index],
  ])('%s anew where the file changed underway', async (_how, chosen) => {
    const damaged = Buffer.from(FORECAST).fill(0x20, 60_000, 90_000)
    const { address, mirror } = await startMirror({ file: damaged, etag: '"before"' })
    let broken = false
    mirror.mischief = (request, response) => {
      if (broken || request.path.endsWith('.idx')) return false
      broken = true
      breakOff(response, request, mirror, 9000)
      Object.assign(mirror, { file: FORECAST, etag: '"after"' })
      return true
    }
    const settings = source(address, chosen ? { index: chosen } : {})
    const [file] = await fetchRun(settings, RUN, freshFolder(), asking())
    expect(readFileSync(file).equals(chosen ? WIND_BYTES : FORECAST)).toBe(true)
  })

  it('although the mirror errs, stalls and is busy for a while', async () => {
    const { address } = await startMirror({
      mischief: (_request, response, count) => {
        if (count === 1) response.writeHead(503).end()
        else if (count === 2) response.writeHead(429).end()
        else if (count > 3) return false
        return true // the third is never answered
      },
    })
    const [file] = await fetchRun(source(address), RUN, freshFolder(), asking())
    expect(readFileSync(file).equals(FORECAST)).toBe(true)
  })

  it('and goes on with the steps that a stopped attempt lacked', async () => {
    const { address, mirror, requests } = await startMirror()
    const folder = freshFolder()
    const steps = source(address, { stepHours: [0, 3, 6] })
    mirror.mischief = ({ path }, response) => {
      if (!path.endsWith('f006.grib2')) return false
      response.writeHead(404).end()
      return true
    }
    await expect(fetchRun(steps, RUN, folder, asking())).rejects.toThrow('status 404')
    requests.length = 0
    mirror.mischief = () => false
    expect(await fetchRun(steps, RUN, folder, asking())).toHaveLength(3)
    expect(requests.map(({ path }) => path)).toEqual(['/20110110/12/f006.grib2'])
  })
})

describe('a run is not taken', () => {
  /** Fails as `message` says, leaving nothing that could pass for a step. */
  async function refused(settings: SourceSettings, message: string, how = asking()) {
    const folder = freshFolder()
    await expect(fetchRun(settings, RUN, folder, how)).rejects.toThrow(message)
    expect(readdirSync(folder)).toEqual([])
  }

  it('that is cut off', async () => {
    const { address } = await startMirror({ file: FORECAST.subarray(0, 60_000) })
    await refused(source(address), 'ends inside the message at byte 51882')
  })

  it('with a message that is damaged', async () => {
    const file = Buffer.from(FORECAST).fill(0, 16_892, 16_896) // the first message's 7777
    const { address } = await startMirror({ file })
    await refused(source(address), 'does not end with 7777')
  })

  it('that is no forecast at all', async () => {
    const { address } = await startMirror({
      file: Buffer.from('<html>Down for maintenance</html>'),
    })
    await refused(source(address), 'no GRIB message')
  })

  it('whose index lacks what is wanted', async () => {
    const { address } = await startMirror({ index: INDEX.split('\n').slice(0, 8).join('\n') })
    await refused(source(address, { index }), 'the index lacks UGRD at 500 mb')
  })

  it('whose index is of another run, or no index', async () => {
    const other = await startMirror({ index: INDEX.replaceAll('2011011012', '2011011006') })
    await refused(source(other.address, { index }), 'of the run 2011011006, not 2011011012')
    const none = await startMirror({ index: 'Not found' })
    await refused(source(none.address, { index }), 'a line of another form')
  })

  it('whose index does not fit the file', async () => {
    const { address } = await startMirror({ index: INDEX.replace('84224', '84000') })
    await refused(source(address, { index }), 'the index does not fit the file')
  })

  it('in ranges from a mirror that has none', async () => {
    const { address, requests } = await startMirror({ ranges: false })
    await refused(source(address, { index }), 'served whole only')
    expect(requests).toHaveLength(2)
  })

  it('that is not there yet, and that is not asked for again and again', async () => {
    const { address, requests } = await startMirror({
      mischief: (_request, response) => {
        response.writeHead(404).end()
        return true
      },
    })
    await refused(source(address), 'status 404')
    expect(requests).toHaveLength(1)
  })

  it('from a mirror that errs on and on, or answers never', async () => {
    const erring = await startMirror({
      mischief: (_request, response) => {
        response.writeHead(500).end()
        return true
      },
    })
    await refused(source(erring.address), 'status 500')
    expect(erring.requests).toHaveLength(4)
    const silent = await startMirror({ mischief: () => true })
    await refused(source(silent.address), 'sends nothing for 300 ms')
  })

  it('that is larger than there is room for', async () => {
    const { address } = await startMirror()
    let left = 50_000
    const spend = (bytes: number) => {
      left -= bytes
      if (left < 0) throw new Error('no room')
    }
    await refused(source(address), 'no room', asking({ spend }))
  })

  it('when the service stops', async () => {
    const { address, mirror } = await startMirror()
    const abort = new AbortController()
    mirror.mischief = (request, response, count) => {
      if (count === 1) serveFile(response, request, mirror)
      else abort.abort(new Error('stopped'))
      return true
    }
    const folder = freshFolder()
    const steps = source(address, { stepHours: [0, 3] })
    const fetching = fetchRun(steps, RUN, folder, asking({ signal: abort.signal }))
    await expect(fetching).rejects.toThrow('stopped')
    expect(readdirSync(folder)).toEqual(['0000.grib2'])
  })
})
