import { mkdtempSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import {
  newestRun,
  nextAvailable,
  readSources,
  sourceUrl,
} from '../../src/fetching/sourceSettings.ts'

const SOURCE = {
  name: 'global',
  url: 'https://mirror.example/{runYear}{runMonth}{runDay}/t{runHour}z.{region}.f{step3}',
  region: 'north & south',
  runs: '0 0,6,12,18 * * *',
  availableAfterS: 4 * 3600,
  stepHours: { from: 0, to: 12, every: 3 },
  index: { wanted: [{ variables: ['HGT'], levels: ['500 mb'] }] },
}

function read(sources: unknown) {
  const file = join(mkdtempSync(join(tmpdir(), 'driftbook-sources-')), 'sources.json')
  writeFileSync(file, typeof sources === 'string' ? sources : JSON.stringify(sources))
  return readSources(file)
}

const at = (iso: string) => Date.parse(iso) / 1000

it('a source has its defaults, its steps and its addresses', () => {
  const [source] = read({ sources: [SOURCE] })
  expect(source).toMatchObject({
    stepHours: [0, 3, 6, 9, 12],
    keepRuns: 2,
    diskBudgetMB: 4000,
    index: { suffix: '.idx' },
  })
  expect(sourceUrl(source, at('2026-03-05T06:00:00Z'), 9)).toBe(
    'https://mirror.example/20260305/t06z.north%20%26%20south.f009',
  )
})

describe('the newest run', () => {
  const [source] = read({ sources: [SOURCE] })

  it.each([
    ['2026-12-05T15:59:59Z', '2026-12-05T06:00:00Z'],
    ['2026-12-05T16:00:00Z', '2026-12-05T12:00:00Z'],
    ['2026-12-05T16:00:00.500Z', '2026-12-05T12:00:00Z'],
    ['2026-12-05T21:00:00Z', '2026-12-05T12:00:00Z'],
    ['2026-12-06T03:59:00Z', '2026-12-05T18:00:00Z'],
    ['2027-01-01T04:00:01Z', '2027-01-01T00:00:00Z'],
  ])('at %s is that of %s', (present, run) => {
    expect(newestRun(source, at(present))).toBe(at(run))
  })

  it('is followed by the next of the pattern, four hours after its time', () => {
    expect(nextAvailable(source, at('2026-12-05T18:00:00Z'))).toBe(at('2026-12-06T04:00:00Z'))
  })
})

it.each([
  ['{', 'sources.json'],
  [{}, '/sources'],
  [{ sources: [{ ...SOURCE, name: 'Global!' }] }, '/sources/0/name'],
  [{ sources: [SOURCE, SOURCE] }, 'same name'],
  [{ sources: [{ ...SOURCE, url: 'ftp://mirror.example/' }] }, '/sources/0/url'],
  [{ sources: [{ ...SOURCE, url: 'https://mirror.example/{date}' }] }, 'holds {date}'],
  [{ sources: [{ ...SOURCE, runs: 'daily-ish' }] }, '/sources/0/runs'],
  [{ sources: [{ ...SOURCE, stepHours: [] }] }, '/sources/0/stepHours'],
  [{ sources: [{ ...SOURCE, stepHours: { from: 6, to: 0, every: 1 } }] }, '/sources/0/stepHours'],
  [{ sources: [{ ...SOURCE, index: { wanted: [] } }] }, '/sources/0/index/wanted'],
  [{ sources: [{ ...SOURCE, delay: 3 }] }, 'delay'],
])('%j is refused by its member', (sources, message) => {
  expect(() => read(sources)).toThrow(message)
})
