import { setImmediate } from 'node:timers/promises'
import { z } from 'zod'
import { OutsideField } from '../../fields/outsideField.ts'
import { NotFlyable } from '../../physics/notFlyable.ts'
import { type FlightRow } from '../../store/flights.ts'
import { type Store } from '../../store/store.ts'
import { type App, type Context } from '../context.ts'
import { answerCreation } from '../creating.ts'
import { storedPlan, storedRun } from '../flightAnswer.ts'
import { flyRun, type FlownRun } from '../flying.ts'
import { keepRun } from '../keeping.ts'
import { describeNotFlyable } from '../notFlyableAnswer.ts'
import { describeOutside } from '../outsideFieldAnswer.ts'
import { faultyRequest, Problem, type Fault } from '../problems.ts'
import { creatingHeaders, idSchema, problemAnswers, timeSchema } from '../schemas/common.ts'
import { airSchema } from '../schemas/plan.ts'
import { shiftSchema } from '../schemas/run.ts'
import { flightFilter } from './flights.ts'

/** More flights than this are not flown again at once. */
const MOST_FLIGHTS = 5000

/** Other requests get a turn after this many ms of flying. */
const TURN_MS = 10

const rerunRequestSchema = z
  .strictObject({
    air: airSchema,
    flightIds: z.array(idSchema).min(1).max(MOST_FLIGHTS).optional(),
    launchFrom: timeSchema.optional().describe('Released at this time or later'),
    launchTo: timeSchema.optional().describe('Released before this time'),
  })
  .meta({
    id: 'RerunRequest',
    description:
      'The air, and which flights: those named, those of a span of release times, or all',
  })

type RerunRequest = z.output<typeof rerunRequestSchema>

const rerunAnswerSchema = z.object({
  count: z.int(),
  shifts: z
    .array(z.object({ flightId: idSchema, title: z.string(), runId: idSchema, shift: shiftSchema }))
    .describe('Farthest moved landing first'),
})

/** Many stored flights flown again at once. */
export function rerunRoutes(app: App, { store, airs }: Context): void {
  app.post(
    '/v1/reruns',
    {
      schema: {
        tags: ['Runs'],
        summary: 'Fly many stored flights again in other air: all are stored, or none',
        headers: creatingHeaders,
        body: rerunRequestSchema,
        response: { 201: rerunAnswerSchema, ...problemAnswers },
      },
    },
    (request, reply) =>
      answerCreation(request, reply, store, async () => {
        const flights = chosenFlights(store, request.body)
        airs.source(request.body.air) // refuse unknown air before anything else
        const flown: { flight: FlightRow; made: FlownRun }[] = []
        const faults: Fault[] = []
        let turn = performance.now()
        for (const flight of flights) {
          try {
            const latest = store.runs.latestAnswer(flight.id)
            const before = latest === undefined ? null : storedRun(latest)
            const plan = { ...storedPlan(flight), air: request.body.air }
            flown.push({ flight, made: flyRun(flight.id, plan, before, airs) })
          } catch (error) {
            if (!(error instanceof NotFlyable) && !(error instanceof OutsideField)) throw error
            const { path, message } =
              error instanceof NotFlyable
                ? describeNotFlyable(error.reason)
                : describeOutside(error)
            faults.push({ path: '/air', message: `Flight ${flight.id}, ${path}: ${message}` })
          }
          if (performance.now() - turn > TURN_MS) {
            await setImmediate()
            turn = performance.now()
          }
        }
        if (faults.length > 0) throw faultyRequest(422, faults)
        return {
          location: null,
          answer: rerunAnswer(flown),
          store: () => {
            for (const { flight, made } of flown) {
              if (!store.flights.get(flight.id)) {
                throw new Problem(
                  409,
                  `Flight ${flight.id} was deleted meanwhile: nothing is stored.`,
                )
              }
              keepRun(store, made)
            }
          },
        }
      }),
  )
}

function rerunAnswer(flown: readonly { flight: FlightRow; made: FlownRun }[]) {
  const shifts = flown
    .map(({ flight, made }) => ({
      flightId: flight.id,
      title: flight.title,
      runId: made.run.id,
      shift: made.run.shift,
    }))
    .sort((a, b) => (b.shift?.landingDistanceM ?? 0) - (a.shift?.landingDistanceM ?? 0))
  return { count: shifts.length, shifts }
}

function chosenFlights(store: Store, wanted: RerunRequest): FlightRow[] {
  const { flightIds, launchFrom, launchTo } = wanted
  const filter = flightFilter({ launchFrom, launchTo })
  if (!flightIds) {
    const flights = store.flights.match(filter, MOST_FLIGHTS + 1)
    if (flights.length > MOST_FLIGHTS) {
      throw new Problem(
        422,
        `More than ${MOST_FLIGHTS} flights match: narrow the span of release times.`,
      )
    }
    return flights
  }
  const faults: Fault[] = []
  const flights = [...new Set(flightIds)].flatMap((id, index) => {
    const flight = store.flights.get(id)
    if (flight) return [flight]
    faults.push({ path: `/flightIds/${index}`, message: `there is no flight with the id ${id}` })
    return []
  })
  if (faults.length > 0) throw faultyRequest(422, faults)
  return flights.filter(
    ({ launchTime }) =>
      launchTime >= (filter.launchFrom ?? -Infinity) && launchTime < (filter.launchTo ?? Infinity),
  )
}
