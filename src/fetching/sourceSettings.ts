import { readFileSync } from 'node:fs'
import { Cron } from 'croner'
import { z } from 'zod'

/** What a URL template may name; braces as in RFC 6570, level 1. */
const PLACES = [
  'runYear',
  'runMonth',
  'runDay',
  'runHour',
  'step',
  'step2',
  'step3',
  'region',
] as const

const nameSchema = z
  .string()
  .regex(/^[a-z0-9][a-z0-9-]{0,63}$/, 'must be lower-case letters, digits and hyphens')

const urlSchema = z.string().superRefine((template, context) => {
  const fault = templateFault(template)
  if (fault !== null) context.addIssue({ code: 'custom', message: fault })
})

const hours = z.int().min(0).max(1000)

const stepsSchema = z
  .union([
    z.array(hours).min(1).max(500),
    z
      .strictObject({ from: hours, to: hours, every: z.int().min(1).max(1000) })
      .refine(({ from, to }) => from <= to, 'must not end before it begins'),
  ])
  .transform((steps) => {
    if (Array.isArray(steps)) return [...new Set(steps)].sort((a, b) => a - b)
    const count = Math.floor((steps.to - steps.from) / steps.every) + 1
    return Array.from({ length: count }, (_, index) => steps.from + index * steps.every)
  })

const names = z.array(z.string().min(1).max(100)).min(1).max(200)

const sourceSchema = z.strictObject({
  name: nameSchema,
  url: urlSchema,
  region: z.string().max(200).default(''),
  runs: z.string().superRefine((pattern, context) => {
    const fault = cronFault(pattern)
    if (fault !== null) context.addIssue({ code: 'custom', message: fault })
  }),
  availableAfterS: z
    .number()
    .min(0)
    .max(7 * 86_400),
  stepHours: stepsSchema,
  index: z
    .strictObject({
      suffix: z.string().min(1).max(100).default('.idx'),
      wanted: z
        .array(z.strictObject({ variables: names, levels: names }))
        .min(1)
        .max(100),
    })
    .optional(),
  keepRuns: z.int().min(1).max(100).default(2),
  diskBudgetMB: z.number().positive().max(1e7).default(4000),
  lookAgainAfterS: z.number().min(1).max(86_400).default(600),
})

const fileSchema = z
  .strictObject({ sources: z.array(sourceSchema).max(100) })
  .refine(
    ({ sources }) => new Set(sources.map(({ name }) => name)).size === sources.length,
    'two sources have the same name',
  )

/** A source of forecasts, as an operator describes it. Names carry their units. */
export type SourceSettings = z.output<typeof sourceSchema>

/**
 * Reads the file of sources.
 * @throws Error that names the file and each malformed member
 */
export function readSources(file: string): SourceSettings[] {
  let json: unknown
  try {
    json = JSON.parse(readFileSync(file, 'utf8'))
  } catch (error) {
    throw new Error(`${file}: ${error instanceof Error ? error.message : String(error)}`, {
      cause: error,
    })
  }
  const result = fileSchema.safeParse(json)
  if (result.success) return result.data.sources
  const faults = result.error.issues.map(
    ({ path, message }) => `/${path.map(String).join('/')}: ${message}`,
  )
  throw new Error(`${file}: ${faults.join('. ')}`)
}

/** The address of one step of one run; `runTime` in s since 1970 UTC, `step` in hours. */
export function sourceUrl(source: SourceSettings, runTime: number, step: number): string {
  const iso = new Date(runTime * 1000).toISOString()
  const filled: Record<(typeof PLACES)[number], string> = {
    runYear: iso.slice(0, 4),
    runMonth: iso.slice(5, 7),
    runDay: iso.slice(8, 10),
    runHour: iso.slice(11, 13),
    step: String(step),
    step2: String(step).padStart(2, '0'),
    step3: String(step).padStart(3, '0'),
    region: encodeURIComponent(source.region),
  }
  return source.url.replace(/\{(\w+)\}/g, (_, name) => filled[name as keyof typeof filled])
}

/** The newest run that is there by a time, s since 1970 UTC; null where there is none. */
export function newestRun({ runs, availableAfterS }: SourceSettings, at: number): number | null {
  // A run counts from the second it is due on: croner looks strictly before.
  const before = new Date((at - availableAfterS) * 1000 + 1000)
  const found = new Cron(runs, { timezone: 'UTC' }).previousRuns(1, before).at(0)
  return found ? found.getTime() / 1000 : null
}

/** When the run after `runTime` will be there, s since 1970 UTC; null where none follows. */
export function nextAvailable(source: SourceSettings, runTime: number): number | null {
  const { runs, availableAfterS } = source
  const next = new Cron(runs, { timezone: 'UTC' }).nextRun(new Date(runTime * 1000))
  return next ? next.getTime() / 1000 + availableAfterS : null
}

function templateFault(template: string): string | null {
  const unknown = [...template.matchAll(/\{([^}]*)\}?/g)].find(
    ([whole, name]) => !whole.endsWith('}') || !PLACES.some((place) => place === name),
  )
  if (unknown) return `holds ${unknown[0]}: only {${PLACES.join('}, {')}} are filled in`
  const plain = template.replaceAll(/\{\w+\}/g, '0')
  if (!URL.canParse(plain) || !/^https?:$/.test(new URL(plain).protocol)) {
    return 'must be an http or https address'
  }
  return null
}

function cronFault(pattern: string): string | null {
  try {
    new Cron(pattern, { timezone: 'UTC' })
    return null
  } catch (error) {
    return `is no cron pattern: ${error instanceof Error ? error.message : String(error)}`
  }
}
