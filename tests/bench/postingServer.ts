import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import fastify from 'fastify'
import { buildApp } from '../../src/service/app.ts'
import { openDatabase } from '../../src/store/database.ts'
import { Store } from '../../src/store/store.ts'
import { MIGRATIONS } from '../service/harness.ts'

/** Either the whole service, or a bare route that inserts and answers the same bytes. */
const file = join(mkdtempSync(join(tmpdir(), 'driftbook-bench-')), 'bench.sqlite')

if (process.argv[2] === 'whole') {
  const app = await buildApp(new Store(file, MIGRATIONS), false)
  console.log(await app.listen({ host: '127.0.0.1', port: 0 }))
} else {
  const [answer, trackBytes] = [process.argv[3], Number(process.argv[4])]
  const track = Buffer.alloc(trackBytes, 7)
  const database = openDatabase(file, MIGRATIONS)
  database.exec('CREATE TABLE bare (id INTEGER PRIMARY KEY, body TEXT, answer TEXT, track BLOB)')
  const insert = database.prepare('INSERT INTO bare (body, answer, track) VALUES (?, ?, ?)')
  const app = fastify()
  app.post('/v1/flights', (request, reply) => {
    insert.run(JSON.stringify(request.body), answer, track)
    return reply.status(201).type('application/json').send(answer)
  })
  console.log(await app.listen({ host: '127.0.0.1', port: 0 }))
}
