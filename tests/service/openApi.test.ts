import { readFileSync } from 'node:fs'
import { expect, test } from 'vitest'
import { startService } from './harness.ts'

interface Document {
  openapi: string
  paths: Record<string, Record<string, { summary?: string; responses: Record<string, object> }>>
  components: { schemas: Record<string, object> }
}

test('the committed OpenAPI document is the one the code generates', async () => {
  const { http } = await startService()
  const committed = readFileSync(new URL('../../openapi/driftbook.json', import.meta.url), 'utf8')
  const served = await http.get('/openapi.json').expect(200)
  expect(served.body).toEqual(JSON.parse(committed))
})

test('every route is described with a summary and its problem answers', async () => {
  const { http } = await startService()
  const { openapi, paths } = (await http.get('/openapi.json')).body as Document
  expect(openapi).toBe('3.1.0')
  for (const [path, methods] of Object.entries(paths)) {
    for (const [method, route] of Object.entries(methods)) {
      expect(route.summary, `${method} ${path}`).toBeTruthy()
      if (path !== '/health') expect(route.responses, `${method} ${path}`).toHaveProperty('4XX')
    }
  }
})

test('the documentation is readable at /docs, without anything from elsewhere', async () => {
  const { http } = await startService()
  const page = await http.get('/docs/').expect(200).expect('content-type', /html/)
  expect(page.headers['content-security-policy']).toContain("default-src 'self'")
  expect(page.text).not.toMatch(/(src|href)="https?:/)
})

test('the service says that it is well', async () => {
  const { http } = await startService()
  expect((await http.get('/health').expect(200)).body).toMatchObject({ status: 'ok', flights: 0 })
})
