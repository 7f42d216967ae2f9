import { z } from 'zod'
import { idSchema, timeSchema } from './common.ts'

/** Radiosondes are released some hundred kilometres apart, twice a day: common practice. */
const NEAR_M = 250_000
const NEAR_S = 12 * 3600

const webhookKindSchema = z.enum(['run-stored', 'landing-moved', 'rerun-failed'])

/** 24 to 64 bytes in base64: Standard Webhooks specification, "Signature scheme". */
const SECRET = /^whsec_[A-Za-z0-9+/]{32,86}={0,2}$/

const webhookMembers = {
  url: z
    .url({ protocol: /^https?$/, error: 'must be an http or https address' })
    .max(2000)
    .refine((url) => !/^https?:\/\/[^/?#]*@/i.test(url), 'must hold no user name or password')
    .describe('Where events are posted'),
  kinds: z
    .array(webhookKindSchema)
    .min(1)
    .describe('Which events are posted')
    .default(['landing-moved']),
}

export const watchRequestSchema = z
  .strictObject({
    tellBeyondM: z
      .number()
      .min(0)
      .max(2e7)
      .describe('How far the landing moves, since it was last told, before it is told again'),
    withinM: z
      .number()
      .min(0)
      .max(2e7)
      .default(NEAR_M)
      .describe('How far from the launch a sounding may be observed to cover the flight'),
    withinS: z
      .number()
      .min(0)
      .max(30 * 86_400)
      .default(NEAR_S)
      .describe('How long before or after the release a sounding may be valid'),
    webhook: z
      .strictObject({
        ...webhookMembers,
        secret: z
          .string()
          .regex(SECRET, 'must be whsec_ and 24 to 64 bytes in base64')
          .describe('Signs what is posted (Standard Webhooks); never answered'),
      })
      .optional()
      .describe('Needs a service that was started with WEBHOOKS=public or WEBHOOKS=on'),
  })
  .meta({ id: 'WatchRequest', description: 'How a flight is watched' })

export type WatchRequest = z.output<typeof watchRequestSchema>

export const watchSchema = z
  .object({
    flightId: idSchema,
    createdAt: timeSchema,
    updatedAt: timeSchema,
    tellBeyondM: z.number(),
    withinM: z.number(),
    withinS: z.number(),
    toldRunId: idSchema.describe('The run whose landing was told last'),
    webhook: z
      .object({
        ...webhookMembers,
        kinds: z.array(webhookKindSchema),
        owed: z
          .array(
            z.object({
              eventId: idSchema,
              attempts: z.int(),
              nextAttemptAt: timeSchema,
              complaint: z.string().nullable().describe('Why the last attempt failed'),
            }),
          )
          .describe('Events that are not delivered yet'),
      })
      .nullable(),
  })
  .meta({ id: 'Watch', description: 'How a flight is watched, and what its webhook is still owed' })

export type Watch = z.output<typeof watchSchema>
