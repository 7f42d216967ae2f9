import { type FastifyInstance } from 'fastify'
import { getLocation, parse, type ParseError, printParseErrorCode } from 'jsonc-parser'
import { faultyRequest } from './problems.ts'

/** Largest JSON body, bytes. */
export const JSON_LIMIT = 1_000_000

/** Reads JSON bodies; what is no JSON is refused with the place where it stops being any. */
export function acceptJson(app: FastifyInstance): void {
  const standard = app.getDefaultJsonParser('error', 'error')
  app.addContentTypeParser(
    'application/json',
    { parseAs: 'string', bodyLimit: JSON_LIMIT },
    (request, body: string, done) => {
      void standard(request, body, (error, value) => {
        if (error) done(unreadableJson(body))
        else done(null, value)
      })
    },
  )
}

function unreadableJson(body: string): Error {
  if (body.trim() === '') return faultyRequest(400, [{ path: '', message: 'is empty: send JSON' }])
  const errors: ParseError[] = []
  parse(body, errors, { disallowComments: true })
  const [first] = errors
  if (errors.length === 0) {
    return faultyRequest(400, [{ path: '', message: 'holds a member name that is not allowed' }])
  }
  const path = getLocation(body, first.offset)
    .path.map((part) => `/${part}`)
    .join('')
  const found = body.slice(first.offset, first.offset + 20)
  return faultyRequest(400, [
    {
      path,
      message: `is no JSON at character ${first.offset + 1}, ${JSON.stringify(found)} (${printParseErrorCode(first.error)})`,
    },
  ])
}
