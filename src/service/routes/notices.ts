import { unpackTrack } from '../../exchange/trackRow.ts'
import { classify } from '../../physics/icaoClass.ts'
import { crossings, extent, type AskedLevel, type Crossing } from '../../planning/crossings.ts'
import { anyAirOf } from '../../planning/airSource.ts'
import { type App, type Context } from '../context.ts'
import { storedPlan, storedRun } from '../flightAnswer.ts'
import { notFound } from '../problems.ts'
import { fliesDifferently, place } from '../runAnswer.ts'
import { idParams, problemAnswers } from '../schemas/common.ts'
import { noticeQuery, noticeSchema, type Notice, type NoticeCrossing } from '../schemas/notice.ts'
import { type Plan } from '../schemas/plan.ts'
import {
  bearingDegrees,
  degrees,
  GRAMS,
  HECTOPASCAL,
  isoTime,
  round,
  seconds,
  SQUARE_CENTIMETRES,
} from '../units.ts'

/** What the airspace authority and the crew need of a run. */
export function noticeRoutes(app: App, { store, airs }: Context): void {
  app.get(
    '/v1/runs/:id/notice',
    {
      schema: {
        tags: ['Runs'],
        summary: 'Class of the balloon, passages of levels, and extent of a run',
        description:
          'Flight levels are surfaces of pressure: they are met where the air of the run has the pressure that the standard atmosphere has at that height.',
        params: idParams,
        querystring: noticeQuery,
        response: { 200: noticeSchema, ...problemAnswers },
      },
    },
    (request): Notice => {
      const { id } = request.params
      const stored = store.runs.withTrack(id)
      if (!stored) throw notFound('run', id)
      const run = storedRun(stored.answer)
      const flight = store.flights.get(run.flightId)
      if (!flight) throw notFound('flight', run.flightId)
      const plan = storedPlan(flight)

      const release = seconds(run.plan.launch.time)
      const track = unpackTrack(stored.track, release).map((row) => ({
        ...place(row),
        altitude: row.altitudeM,
        elapsed: row.elapsedS,
      }))
      const { flightLevels = [], altitudesM = [] } = request.query
      const levels: AskedLevel[] = [
        ...flightLevels.map((flightLevel) => ({ kind: 'flight-level', flightLevel }) as const),
        ...altitudesM.map((altitude) => ({ kind: 'altitude', altitude }) as const),
      ]
      const air = anyAirOf(airs.source(run.plan.air))
      const passed = crossings(track, air, release, levels).map((crossing) =>
        crossingAnswer(crossing, release),
      )
      return {
        runId: id,
        flightId: flight.id,
        title: flight.title,
        balloonClass: balloonClass(plan),
        planChanged: fliesDifferently(plan, run.plan),
        crossings: passed,
        notReached: {
          flightLevels: flightLevels.filter(
            (level) => !passed.some(({ flightLevel }) => flightLevel === level),
          ),
          altitudesM: altitudesM.filter(
            (level) => !passed.some(({ levelAltitudeM }) => levelAltitudeM === level),
          ),
        },
        extent: extentAnswer(track),
        cautions: run.cautions,
      }
    },
  )
}

function balloonClass({ payload }: Plan): Notice['balloonClass'] {
  const packages = (payload.packages ?? []).map(({ name, massG, smallestFaceCm2 }) => ({
    name,
    mass: massG / GRAMS,
    smallestFace: smallestFaceCm2 === undefined ? null : smallestFaceCm2 / SQUARE_CENTIMETRES,
  }))
  const decided = classify(payload.massG / GRAMS, packages, payload.lineStrengthN ?? null)
  return { name: decided.class, reasons: decided.reasons, missing: decided.missing }
}

function crossingAnswer(crossing: Crossing, release: number): NoticeCrossing {
  const { level, way, elapsed, latitude, longitude, altitude, pressure } = crossing
  return {
    ...(level.kind === 'altitude'
      ? { levelAltitudeM: level.altitude }
      : { flightLevel: level.flightLevel }),
    way,
    time: isoTime(release + elapsed),
    elapsedS: round(elapsed, 1),
    latitudeDeg: degrees(latitude),
    longitudeDeg: degrees(longitude),
    altitudeM: round(altitude, 1),
    pressureHPa: round(pressure / HECTOPASCAL, 3),
  }
}

function extentAnswer(track: Parameters<typeof extent>[0]): Notice['extent'] {
  const { farthest, north, south, east, west } = extent(track)
  return {
    distanceM: round(farthest.distance, 1),
    bearingDeg: bearingDegrees(farthest.bearing),
    northDeg: degrees(north),
    southDeg: degrees(south),
    eastDeg: degrees(east),
    westDeg: degrees(west),
  }
}
