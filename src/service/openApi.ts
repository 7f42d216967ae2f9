import { jsonSchemaTransform, jsonSchemaTransformObject } from 'fastify-type-provider-zod'
import { type OpenAPIV3_1 } from 'openapi-types'
import { type z } from 'zod'

/** What the OpenAPI document says of the service as a whole. */
export const openApiInfo = {
  openapi: '3.1.0',
  info: {
    title: 'Driftbook',
    version: '1',
    description:
      'Predicts the flights of high-altitude sounding balloons and keeps every prediction. Airspace notification follows local regulation; the competent authority decides.',
  },
  tags: [
    { name: 'Flights', description: 'Planned flights, and what became of them' },
    { name: 'Runs', description: 'Stored predictions and their tracks' },
    {
      name: 'Watches',
      description: 'Flights that keep themselves current, and what happens to them',
    },
    { name: 'Trials', description: 'Predictions that are not stored' },
    { name: 'Planning', description: 'How much gas, how sure, and when' },
    { name: 'Jobs', description: 'Calculations that take longer than two seconds' },
    { name: 'Soundings', description: 'Uploaded profiles of the air' },
    { name: 'Sources', description: 'Where forecasts are fetched from' },
    { name: 'Service', description: 'The service itself' },
  ],
}

/** A body that may come as several media types, each with its zod schema. */
interface BodyOfManyTypes {
  content: Record<string, { schema: z.ZodType }>
}

/** Describes a route from its zod schemas. */
export const describeRoute: typeof jsonSchemaTransform = (input) => {
  const { schema } = input
  const body = schema.body as BodyOfManyTypes | z.ZodType | undefined
  if (!body || !('content' in body)) return jsonSchemaTransform(input)
  // One media type after the other stands in as the body, since only one is described at a time.
  const described = Object.entries(body.content).map(([type, { schema: typed }]) => {
    const one = jsonSchemaTransform({ ...input, schema: { ...schema, body: typed } })
    return [type, { schema: one.schema.body }, one] as const
  })
  const content = Object.fromEntries(described.map(([type, entry]) => [type, entry]))
  const [[, , first]] = described
  return { ...first, schema: { ...first.schema, body: { content } } }
}

type Document = Partial<OpenAPIV3_1.Document>

/** Describes the shared schemas, once each: as they are sent where nothing answers them, else as answered. */
export const describeSchemas: typeof jsonSchemaTransformObject = (input) => {
  const text = JSON.stringify(jsonSchemaTransformObject(input), withoutPatterns)
  const document = JSON.parse(text) as Document
  const schemas: Record<string, unknown> = document.components?.schemas ?? {}
  const reached = new Set<string>()
  reach(document.paths, schemas, reached)
  for (const name of Object.keys(schemas)) {
    if (!reached.has(name)) Reflect.deleteProperty(schemas, name)
  }
  const sentOnly = Object.keys(schemas).filter(
    (name) => name.endsWith('Input') && !(name.slice(0, -'Input'.length) in schemas),
  )
  const renamed = sentOnly.reduce(
    (json, name) => json.replaceAll(`${name}"`, `${name.slice(0, -'Input'.length)}"`),
    JSON.stringify(document),
  )
  return JSON.parse(renamed) as Document
}

/** The `format` of a time or id says what its long pattern says. */
function withoutPatterns(_key: string, value: unknown): unknown {
  if (typeof value !== 'object' || value === null || !('format' in value)) return value
  const { pattern: _pattern, ...rest } = value as { pattern?: unknown }
  return rest
}

/** Adds to `reached` the names of the schemas that `part` refers to, itself or through other schemas. */
function reach(part: unknown, schemas: Record<string, unknown>, reached: Set<string>): void {
  for (const [, name] of JSON.stringify(part).matchAll(/"#\/components\/schemas\/([^"]+)"/g)) {
    if (reached.has(name)) continue
    reached.add(name)
    reach(schemas[name], schemas, reached)
  }
}
