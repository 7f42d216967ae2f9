import { STATUS_CODES } from 'node:http'
import { type FastifyError, type FastifyReply, type FastifyRequest } from 'fastify'
import { GribError, type GribProblem } from '../fields/gribError.ts'
import { OutsideField } from '../fields/outsideField.ts'
import { NotFlyable } from '../physics/notFlyable.ts'
import { BadSounding } from '../soundings/badSounding.ts'
import { UnreachableTarget } from '../planning/fillForTarget.ts'
import { NoMemberFlies } from '../planning/pool.ts'
import { describeNotFlyable } from './notFlyableAnswer.ts'
import { describeOutside } from './outsideFieldAnswer.ts'
import { describeUnreachable } from './unreachableAnswer.ts'

/** One thing that is wrong, and where: a JSON pointer into the body, or `?name` of the query. */
export interface Fault {
  path: string
  message: string
}

/** A request that is answered with an RFC 9457 problem. */
export class Problem extends Error {
  readonly status: number
  readonly faults: readonly Fault[]

  constructor(status: number, detail: string, faults: readonly Fault[] = []) {
    super(detail)
    this.name = 'Problem'
    this.status = status
    this.faults = faults
  }
}

/** The problem of a thing that is not there. */
export function notFound(what: string, id: string): Problem {
  return new Problem(404, `There is no ${what} with the id ${id}.`)
}

/** The problem of an address where there is nothing. */
export function notThere({ method, url }: { method: string; url: string }): Problem {
  return new Problem(404, `There is nothing at ${method} ${url}.`)
}

/** Turns every error into its answer: the one place where that is done. */
export function answerError(error: FastifyError, request: FastifyRequest, reply: FastifyReply) {
  const problem = problemOf(error)
  if (problem.status >= 500) request.log.error({ err: error }, 'request failed')
  return sendProblem(reply, problem)
}

/** Answers with a problem. */
export function sendProblem(reply: FastifyReply, problem: Problem) {
  return reply
    .status(problem.status)
    .type('application/problem+json')
    .send(JSON.stringify(bodyOf(problem)))
}

/** The RFC 9457 body that an error is answered with. */
export function problemBody(error: unknown) {
  return bodyOf(problemOf(error as FastifyError))
}

function bodyOf({ status, message, faults }: Problem) {
  return {
    type: 'about:blank',
    title: STATUS_CODES[status] ?? 'Error',
    status,
    detail: message,
    ...(faults.length > 0 ? { errors: [...faults] } : {}),
  }
}

function problemOf(error: FastifyError): Problem {
  if (error instanceof Problem) return error
  if (error instanceof NotFlyable) {
    const fault = describeNotFlyable(error.reason)
    return new Problem(422, fault.message, [fault])
  }
  if (error instanceof BadSounding) return soundingProblem(error)
  if (error instanceof OutsideField) {
    const fault = describeOutside(error)
    return new Problem(422, fault.message, [fault])
  }
  if (error instanceof GribError) return gribProblem(error)
  if (error instanceof UnreachableTarget) return faultyRequest(422, [describeUnreachable(error)])
  if (error instanceof NoMemberFlies) {
    const message = 'is so wide that none of the members flies: narrow it'
    return faultyRequest(422, [{ path: '/spread', message }])
  }
  const status = error.statusCode ?? 500
  if (status === 415) return new Problem(415, 'This content type is not read here; JSON is.')
  if (status < 500) return new Problem(status, error.message)
  return new Problem(500, 'The service failed on this request. The failure is logged.')
}

/** The problem of a body or query with faults; its detail is the first of them. */
export function faultyRequest(status: number, faults: readonly Fault[]): Problem {
  const [first] = faults
  const rest = faults.length - 1
  const detail = `${first.path || 'The body'}: ${first.message}${rest > 0 ? ` (and ${rest} more)` : ''}`
  return new Problem(status, detail, faults)
}

function soundingProblem(error: BadSounding): Problem {
  const faults = error.problems.map(({ path, line, message }) => ({
    path: path ?? '',
    message: line === undefined ? message : `line ${line}: ${message}`,
  }))
  return faultyRequest(error.unparseable ? 400 : 422, faults)
}

/** What a faulty forecast is answered with. */
const GRIB_STATUS: Record<GribProblem, number> = {
  'not-grib': 400,
  truncated: 400,
  damaged: 400,
  'too-large': 413,
  incomplete: 422,
}

function gribProblem({ problem, message }: GribError): Problem {
  return faultyRequest(GRIB_STATUS[problem], [{ path: '', message }])
}
