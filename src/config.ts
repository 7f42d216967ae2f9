import { z } from 'zod'

const environmentSchema = z.object({
  HOST: z.string().min(1).default('127.0.0.1'),
  PORT: z
    .string()
    .regex(/^\d{1,5}$/, 'must be a whole number from 0 to 65535')
    .transform(Number)
    .refine((port) => port <= 65_535, 'must be a whole number from 0 to 65535')
    .default(8080),
  DATABASE_FILE: z.string().min(1).default('driftbook.sqlite'),
  LOG_LEVEL: z.enum(['trace', 'debug', 'info', 'warn', 'error', 'fatal', 'silent']).default('info'),
  DEMO: z.enum(['on', 'off']).default('on'),
  WEBHOOKS: z.enum(['off', 'public', 'on']).default('off'),
})

/** How the service was asked to run. */
export interface Config {
  host: string
  /** 0 lets the system choose */
  port: number
  databaseFile: string
  logLevel: z.output<typeof environmentSchema>['LOG_LEVEL']
  /** Whether an empty database gets the demo flight */
  demo: boolean
  /** Whether webhooks are posted: not at all, to public addresses only, or to any address */
  webhooks: 'off' | 'public' | 'on'
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
  const { HOST, PORT, DATABASE_FILE, LOG_LEVEL, DEMO, WEBHOOKS } = result.data
  return {
    host: HOST,
    port: PORT,
    databaseFile: DATABASE_FILE,
    logLevel: LOG_LEVEL,
    demo: DEMO === 'on',
    webhooks: WEBHOOKS,
  }
}
