import { cpSync, mkdtempSync, readdirSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import Database from 'better-sqlite3'
import { expect, test } from 'vitest'
import { Store } from '../../src/store/store.ts'
import { MIGRATIONS } from '../service/harness.ts'

const folder = () => mkdtempSync(join(tmpdir(), 'driftbook-store-'))

const flight = (id: string) => ({
  id,
  title: id,
  launchTime: 0,
  profileId: null,
  fieldId: null,
  createdAt: '',
  updatedAt: '',
  plan: '{}',
  outcome: null,
})

test('first answers are kept for a week', () => {
  const store = new Store(join(folder(), 'a.sqlite'), MIGRATIONS)
  const keep = (key: string, createdAt: string) => {
    store.firstAnswers.insert({
      key,
      digest: Buffer.from(key),
      location: null,
      answer: '',
      createdAt,
    })
  }
  keep('first', '2026-12-01T09:00:00.000Z')
  keep('second', '2026-12-05T09:00:00.000Z')
  keep('third', '2026-12-08T08:59:00.000Z')
  expect(store.firstAnswers.get('first')).toBeDefined()
  keep('fourth', '2026-12-08T10:01:00.000Z')
  expect(store.firstAnswers.get('first')).toBeUndefined()
  expect(store.firstAnswers.get('second')).toBeDefined()
  store.close()
})

test('a new file is made and migrated, and opened again as it was', () => {
  const file = join(folder(), 'a.sqlite')
  const first = new Store(file, MIGRATIONS)
  first.flights.insert(flight('f'))
  first.close()
  const second = new Store(file, MIGRATIONS)
  expect(second.flights.count()).toBe(1)
  second.close()
  const raw = new Database(file)
  expect(raw.pragma('journal_mode', { simple: true })).toBe('wal')
  raw.close()
})

test('a migration that fails leaves the database as it was', () => {
  const place = folder()
  const migrations = join(place, 'migrations')
  cpSync(MIGRATIONS, migrations, { recursive: true })
  const newest = Math.max(...readdirSync(migrations).map((name) => Number(name.slice(0, 3))))
  const file = join(place, 'a.sqlite')
  new Store(file, migrations).close()
  writeFileSync(join(migrations, '900_bad.sql'), 'CREATE TABLE half (a); CREATE TABLE half (a);')
  expect(() => new Store(file, migrations)).toThrow('half')
  const raw = new Database(file)
  expect(raw.pragma('user_version', { simple: true })).toBe(newest)
  expect(raw.prepare("SELECT * FROM sqlite_master WHERE name = 'half'").all()).toEqual([])
  raw.close()
})

test('a database newer than the program is refused', () => {
  const file = join(folder(), 'a.sqlite')
  new Store(file, MIGRATIONS).close()
  const raw = new Database(file)
  raw.pragma('user_version = 999')
  raw.close()
  expect(() => new Store(file, MIGRATIONS)).toThrow('version 999')
})

test('a file that is no database is refused', () => {
  const file = join(folder(), 'a.sqlite')
  writeFileSync(file, 'a shopping list '.repeat(100))
  expect(() => new Store(file, MIGRATIONS)).toThrow('not a database')
})

test('of writes committed together, one that throws half way is undone alone', async () => {
  const store = new Store(join(folder(), 'a.sqlite'), MIGRATIONS)
  const insert = (...ids: string[]) =>
    store.commit(() => {
      for (const id of ids) store.flights.insert(flight(id))
    })
  const results = await Promise.allSettled([insert('a', 'b'), insert('c', 'c'), insert('d')])
  expect(results.map(({ status }) => status)).toEqual(['fulfilled', 'rejected', 'fulfilled'])
  const { rows } = store.flights.list(
    { launchFrom: null, launchTo: null, title: null },
    { limit: 9, before: null },
  )
  expect(rows.map(({ id }) => id)).toEqual(['d', 'b', 'a'])
  store.close()
})
