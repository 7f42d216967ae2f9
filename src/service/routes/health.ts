import { z } from 'zod'
import { MODEL_VERSION } from '../../physics/flight.ts'
import { type App, type Context } from '../context.ts'

/** Whether the service is well, for whoever watches over it. */
export function healthRoutes(app: App, { store }: Context): void {
  app.get(
    '/health',
    {
      schema: {
        tags: ['Service'],
        summary: 'Whether the service and its database answer',
        response: {
          200: z.object({ status: z.literal('ok'), flights: z.int(), modelVersion: z.string() }),
        },
      },
    },
    () => ({ status: 'ok', flights: store.flights.count(), modelVersion: MODEL_VERSION }),
  )

  app.get('/openapi.json', { schema: { hide: true } }, () => app.swagger())
}
