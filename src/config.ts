import { resolve } from 'node:path'
import { z } from 'zod'
import { placeless, type TileSetting } from './service/tiles.ts'

const environmentSchema = z.object({
  HOST: z.string().min(1).default('127.0.0.1'),
  PORT: z
    .string()
    .regex(/^\d{1,5}$/, 'must be a whole number from 0 to 65535')
    .transform(Number)
    .refine((port) => port <= 65_535, 'must be a whole number from 0 to 65535')
    .default(8080),
  DATABASE_FILE: z.string().min(1).default('driftbook.sqlite'),
  FIELD_DIRECTORY: z.string().min(1).optional(),
  LOG_LEVEL: z.enum(['trace', 'debug', 'info', 'warn', 'error', 'fatal', 'silent']).default('info'),
  DEMO: z.enum(['on', 'off']).default('on'),
  SOURCES_FILE: z.string().min(1).optional(),
  WEBHOOKS: z.enum(['off', 'public', 'on']).default('off'),
  TILES: z
    .string()
    .min(1)
    .superRefine((text, context) => {
      const message = isUrl(text) ? templateFault(text) : fileFault(text)
      if (message !== null) context.addIssue({ code: 'custom', message })
    })
    .optional(),
  TILES_ATTRIBUTION: z.string().max(500).default(''),
})

/** How the service was asked to run. */
export interface Config {
  host: string
  /** 0 lets the system choose */
  port: number
  databaseFile: string
  /** Folder of the forecasts' values */
  fieldDirectory: string
  logLevel: z.output<typeof environmentSchema>['LOG_LEVEL']
  /** Whether an empty database gets the demo flight */
  demo: boolean
  /** Describes the sources that forecasts are fetched from; null: none are */
  sourcesFile: string | null
  /** Whether webhooks are posted: not at all, to public addresses only, or to any address */
  webhooks: 'off' | 'public' | 'on'
  /** What the page's map is drawn on; null: its own coasts alone */
  tiles: TileSetting | null
}

/**
 * Reads the configuration from environment variables.
 * @throws Error that names each malformed variable
 */
export function readConfig(environment: NodeJS.ProcessEnv): Config {
  const result = environmentSchema.safeParse(environment)
  if (!result.success) {
    const faults = result.error.issues.map((issue) => {
      const name = String(issue.path[0])
      return `${name}=${JSON.stringify(environment[name])}: ${issue.message}`
    })
    throw new Error(`The environment is malformed. ${faults.join('. ')}`)
  }
  const { HOST, PORT, DATABASE_FILE, FIELD_DIRECTORY, LOG_LEVEL, DEMO, ...rest } = result.data
  return {
    host: HOST,
    port: PORT,
    databaseFile: DATABASE_FILE,
    fieldDirectory: FIELD_DIRECTORY ?? `${DATABASE_FILE}-fields`,
    logLevel: LOG_LEVEL,
    demo: DEMO === 'on',
    sourcesFile: rest.SOURCES_FILE ?? null,
    webhooks: rest.WEBHOOKS,
    tiles: rest.TILES === undefined ? null : tileSetting(rest.TILES, rest.TILES_ATTRIBUTION),
  }
}

function tileSetting(text: string, attribution: string): TileSetting {
  return isUrl(text)
    ? { kind: 'xyz', template: text, attribution }
    : { kind: 'pmtiles', file: resolve(text), attribution }
}

function isUrl(text: string): boolean {
  return /^[a-z][a-z0-9+.-]*:\/\//i.test(text)
}

function templateFault(text: string): string | null {
  if (!URL.canParse(placeless(text))) return 'is no URL'
  const { protocol, host, username } = new URL(placeless(text))
  if (protocol !== 'http:' && protocol !== 'https:') return 'must begin with http:// or https://'
  if (username !== '') return 'must not carry a user name: every page would show it'
  const missing = ['{z}', '{x}', '{y}'].filter((place) => !text.includes(place))
  if (missing.length > 0) return `must hold ${missing.join(', ')}, where a tile's numbers go`
  if (!text.toLowerCase().includes(host)) return 'must not hold {z}, {x} or {y} in its host'
  const other = /\{(?![zxy]\})[^}]*\}?/.exec(text)
  return other ? `holds ${other[0]}: only {z}, {x} and {y} are filled in` : null
}

function fileFault(text: string): string | null {
  return text.endsWith('.pmtiles')
    ? null
    : 'must be an XYZ template (https://…/{z}/{x}/{y}.png) or the path of a .pmtiles file'
}
