import { z } from 'zod'

/** GeoJSON areas (RFC 7946) as requests send them. */

const position = z
  .tuple([z.number().min(-540).max(540), z.number().min(-90).max(90)])
  .rest(z.number())
  .describe('Longitude and latitude, degrees')

const ring = z
  .array(position)
  .min(4)
  .max(5000)
  .refine(
    (positions) => {
      const first = positions[0]
      const last = positions.at(-1)
      return first[0] === last?.[0] && first[1] === last[1]
    },
    { error: 'must end where it begins (RFC 7946, 3.1.6)' },
  )

const polygonCoordinates = z.array(ring).min(1).max(200)

const polygonSchema = z.looseObject({
  type: z.literal('Polygon'),
  coordinates: polygonCoordinates,
})

const multiPolygonSchema = z.looseObject({
  type: z.literal('MultiPolygon'),
  coordinates: z.array(polygonCoordinates).min(1).max(200),
})

const geometrySchema = z.discriminatedUnion('type', [polygonSchema, multiPolygonSchema])

const featureSchema = z.looseObject({
  type: z.literal('Feature'),
  geometry: geometrySchema,
  properties: z.looseObject({ name: z.string().max(200).optional() }).nullish(),
})

const featureCollectionSchema = z.looseObject({
  type: z.literal('FeatureCollection'),
  features: z.array(featureSchema).max(200),
})

export const areasSchema = z
  .discriminatedUnion('type', [
    featureCollectionSchema,
    featureSchema,
    polygonSchema,
    multiPolygonSchema,
  ])
  .meta({
    id: 'Areas',
    description:
      'GeoJSON polygons: a FeatureCollection or Feature of them, whose `properties.name` names them in the answer, or a bare Polygon or MultiPolygon',
  })

export type Areas = z.output<typeof areasSchema>
