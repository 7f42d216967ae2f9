import { z } from 'zod'

export const mapSchema = z
  .object({
    tiles: z
      .object({
        kind: z.enum(['xyz', 'pmtiles']),
        url: z
          .string()
          .describe('A template with {z}, {x} and {y}, or a PMTiles file of this service'),
        attribution: z.string(),
        minZoom: z.int().optional(),
        maxZoom: z.int().optional(),
        bounds: z.array(z.number()).optional().describe('West, south, east, north, degrees'),
      })
      .nullable()
      .describe('Raster tiles under the map; null: the map draws its own coasts alone'),
  })
  .meta({ id: 'Map', description: 'What the map of the page is drawn on' })

export type MapAnswer = z.output<typeof mapSchema>
