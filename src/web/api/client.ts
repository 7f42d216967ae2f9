/** A problem that the service answered with (RFC 9457). */
export class ServiceProblem extends Error {
  readonly status: number
  readonly faults: readonly { path: string; message: string }[]

  constructor(body: {
    status: number
    detail: string
    errors?: readonly { path: string; message: string }[] | undefined
  }) {
    super(body.detail)
    this.name = 'ServiceProblem'
    this.status = body.status
    this.faults = body.errors ?? []
  }
}

/** The service did not answer: stopped, or out of reach. */
export class ServiceAway extends Error {
  constructor() {
    super('The service does not answer. What you typed is kept; it is tried again.')
    this.name = 'ServiceAway'
  }
}

interface Sending {
  signal?: AbortSignal
  headers?: Record<string, string>
}

/**
 * One call of the service, its answer as JSON (null for 204).
 * @throws ServiceProblem where it refuses, ServiceAway where it does not answer
 */
export async function call<Answer>(
  method: 'GET' | 'POST' | 'PATCH' | 'PUT' | 'DELETE',
  path: string,
  body?: unknown,
  sending: Sending = {},
): Promise<Answer> {
  const raw = body instanceof Blob
  const headers = {
    ...(body === undefined || raw ? {} : { 'content-type': 'application/json' }),
    ...sending.headers,
  }
  const response = await fetch(path, {
    method,
    headers,
    ...(body === undefined ? {} : { body: raw ? body : JSON.stringify(body) }),
    ...(sending.signal ? { signal: sending.signal } : {}),
  }).catch((error: unknown) => {
    if (sending.signal?.aborted) throw error
    throw new ServiceAway()
  })
  if (response.ok) return (response.status === 204 ? null : await response.json()) as Answer
  if (response.headers.get('content-type')?.includes('problem+json')) {
    throw new ServiceProblem((await response.json()) as ServiceProblemBody)
  }
  throw new ServiceAway()
}

type ServiceProblemBody = ConstructorParameters<typeof ServiceProblem>[0]
