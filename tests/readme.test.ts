import { spawnSync, execFile } from 'node:child_process'
import { mkdtempSync, readFileSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { promisify } from 'node:util'
import { expect, onTestFinished, test } from 'vitest'
import { end, startServer } from './service/startedServer.ts'

const readme = readFileSync(new URL('../README.md', import.meta.url), 'utf8')
const blocks = [...readme.matchAll(/^```(sh|python)\n([\s\S]*?)^```$/gm)].map(([, kind, text]) => ({
  kind,
  text,
}))

/** What the blocks call, beside this program. */
const missing = ['bash', 'curl', 'python3'].filter(
  (tool) => spawnSync(tool, ['--version']).status !== 0,
)

test.skipIf(missing.length > 0 && !process.env.CI)(
  `the README's own blocks work, in order${missing.length > 0 ? ` (missing: ${missing.join()})` : ''}`,
  { timeout: 60_000 },
  async () => {
    expect(missing).toEqual([])
    expect(blocks.map(({ kind }) => kind)).toEqual(['sh', 'sh', 'python', 'sh', 'sh', 'sh'])
    const cwd = mkdtempSync(join(tmpdir(), 'driftbook-readme-'))
    const server = await startServer({ DATABASE_FILE: join(cwd, 'a.sqlite') })
    onTestFinished(() => end(server, 'SIGTERM'))
    const answers: string[] = []
    for (const { kind, text } of blocks) {
      const here = text.replaceAll('http://127.0.0.1:8080', server.address)
      if (kind === 'python') writeFileSync(join(cwd, 'ground_station.py'), here)
      else {
        const script = `set -euo pipefail\n${here}`
        const { stdout } = await promisify(execFile)('bash', ['-c', script], { cwd })
        answers.push(stdout)
      }
    }

    const [flight, profile, station, watch, fill] = answers
    expect(JSON.parse(flight)).toMatchObject({
      flight: { title: 'Larkfell ozone 7 (invented)' },
      run: { shift: null, air: { kind: 'standard' } },
    })
    expect(JSON.parse(profile)).toMatchObject({
      profiles: [{ name: 'Dawn (invented)', temperature: { levels: 10 }, wind: { levels: 10 } }],
    })
    expect(station).toMatch(/^burst at 3\d{4} m, 2026-12-05T1\d:/)
    // Twice the wind moves the landing about as far again, still to the east.
    const [, moved, bearing] = /moved ([\d.]+) km towards (\d+) degrees/.exec(station) ?? []
    expect(Number(moved)).toBeGreaterThan(50)
    expect(Math.abs(Number(bearing) - 90)).toBeLessThan(20)
    expect(station).toContain('local regulation')
    expect(readFileSync(join(cwd, 'track.csv'), 'utf8')).toMatch(/^elapsedS,time,latitudeDeg/)
    // The watch as it was set, then the events so far: every run of the flight is one.
    expect(watch).toContain('"tellBeyondM":5000')
    expect(watch.match(/"kind":"run-stored"/g)?.length ?? 0).toBeGreaterThanOrEqual(3)
    expect(JSON.parse(fill)).toMatchObject({ ascent: { releaseRateMs: 5 } })
  },
)
