import { existsSync } from 'node:fs'
import fastifyStatic from '@fastify/static'
import { type FastifyInstance } from 'fastify'

/** Where the build puts the page, seen from `src/service` and from `dist/service` alike. */
const BUILT_PAGE = new URL('../../dist/web', import.meta.url).pathname

/** Serves the page at `/`, as it was compressed by the build; nothing where it was not built. */
export async function servePage(app: FastifyInstance): Promise<void> {
  if (!existsSync(BUILT_PAGE)) return
  await app.register(fastifyStatic, {
    root: BUILT_PAGE,
    preCompressed: true,
    wildcard: false,
    schemaHide: true,
    cacheControl: false,
    setHeaders: (reply, path) => {
      // File names carry a hash of their content, except the document's.
      const lasting = path.includes('/assets/')
      reply.setHeader('cache-control', lasting ? 'public, max-age=31536000, immutable' : 'no-cache')
    },
  })
}
