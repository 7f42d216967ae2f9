import { z } from 'zod'

/** A moment with its zone, ISO 8601. Answers always carry `Z`. */
export const timeSchema = z.iso
  .datetime({
    offset: true,
    error: 'must be an ISO 8601 time with its zone, such as 2026-12-05T09:00:00Z',
  })
  .refine((text) => Math.abs(Date.parse(text)) < 4.1e12, {
    error: 'must lie between the years 1840 and 2099',
  })
  .describe('ISO 8601 time with zone')

export const latitudeSchema = z
  .number()
  .min(-90)
  .max(90)
  .describe('Degrees north of the equator, WGS 84')

export const longitudeSchema = z
  .number()
  .min(-180)
  .max(180)
  .describe('Degrees east of Greenwich, WGS 84')

export const idSchema = z.uuid().describe('UUID version 7')

export const idParams = z.object({ id: idSchema })

export const pageQuery = z.strictObject({
  limit: z.coerce.number().int().min(1).max(200).default(50).describe('Most items to answer'),
  cursor: z.string().max(100).optional().describe('`nextCursor` of the page before'),
})

/** A page of a list, newest first. */
export function pageSchema<Item extends z.ZodType>(item: Item) {
  return z.object({
    items: z.array(item),
    nextCursor: z.string().nullable().describe('Ask with this for what follows; null at the end'),
  })
}

export const creatingHeaders = z.object({
  'idempotency-key': z
    .string()
    .min(1)
    .max(200)
    .optional()
    .describe(
      'Repeat a request with the same key and body within a week, and the first answer is answered again',
    ),
})

export const problemSchema = z
  .object({
    type: z.string(),
    title: z.string(),
    status: z.int(),
    detail: z.string(),
    errors: z
      .array(
        z.object({
          path: z.string().describe('JSON pointer into the body, or `?name` of the query'),
          message: z.string(),
        }),
      )
      .optional(),
  })
  .meta({ id: 'Problem', description: 'RFC 9457 problem details' })

/** The problem answers that any route may give, for the documentation. */
export const problemAnswers = {
  '4xx': {
    description: 'What is wrong with the request',
    content: { 'application/problem+json': { schema: problemSchema } },
  },
} as const
