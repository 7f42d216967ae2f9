import { readFileSync, writeFileSync } from 'node:fs'
import { Store } from '../store/store.ts'
import { buildApp } from './app.ts'

/** Where the generated document is committed. */
const FILE = new URL('../../openapi/driftbook.json', import.meta.url)
const MIGRATIONS = new URL('../../migrations', import.meta.url).pathname

const store = new Store(':memory:', MIGRATIONS)
const app = await buildApp(store, false)
await app.ready()
const document = `${JSON.stringify(app.swagger(), null, 2)}\n`
await app.close()
store.close()

if (process.argv.includes('--check')) {
  if (readFileSync(FILE, 'utf8') !== document) {
    console.error('openapi/driftbook.json differs from the code: run `npm run openapi`.')
    process.exitCode = 1
  }
} else {
  writeFileSync(FILE, document)
}
