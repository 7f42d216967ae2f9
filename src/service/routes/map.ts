import { basename, dirname } from 'node:path'
import fastifyStatic from '@fastify/static'
import { z } from 'zod'
import { type App } from '../context.ts'
import { problemAnswers } from '../schemas/common.ts'
import { mapSchema, type MapAnswer } from '../schemas/map.ts'
import { type TileSource } from '../tiles.ts'
import { notThere } from '../problems.ts'

const TILES_PATH = '/v1/map/tiles.pmtiles'

const tags = ['Map']

/** What the map of the page is drawn on; register in a scope of its own, since it serves a file. */
export async function mapRoutes(app: App, tiles: TileSource | null): Promise<void> {
  app.get(
    '/v1/map',
    {
      schema: {
        tags,
        summary: 'What the map is drawn on',
        response: { 200: mapSchema, ...problemAnswers },
      },
    },
    () => ({ tiles: tiles && tilesAnswer(tiles) }),
  )

  if (tiles?.kind === 'pmtiles') {
    await app.register(fastifyStatic, { root: dirname(tiles.file), serve: false })
  }
  app.get(
    TILES_PATH,
    {
      schema: {
        tags,
        summary: 'The PMTiles file that the operator named, by byte ranges',
        response: {
          200: {
            description: 'The file, or the range of it that was asked for (206)',
            content: { 'application/vnd.pmtiles': { schema: z.string() } },
          },
          ...problemAnswers,
        },
      },
    },
    (request, reply) => {
      if (tiles?.kind !== 'pmtiles') throw notThere(request)
      return reply.type('application/vnd.pmtiles').sendFile(basename(tiles.file))
    },
  )
}

function tilesAnswer(tiles: TileSource): MapAnswer['tiles'] {
  if (tiles.kind === 'xyz') {
    const { kind, template, attribution } = tiles
    return { kind, url: template, attribution }
  }
  const { kind, attribution, minZoom, maxZoom, bounds } = tiles
  return { kind, url: TILES_PATH, attribution, minZoom, maxZoom, bounds }
}
