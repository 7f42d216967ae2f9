import { createHash } from 'node:crypto'
import { type FastifyReply, type FastifyRequest } from 'fastify'
import { type Store } from '../store/store.ts'
import { Problem } from './problems.ts'

/** What a creating request will have made: its answer, and how it is stored. */
export interface Creation {
  /** Path of the new thing; null where there are many */
  location: string | null
  answer: unknown
  /** Writes everything; called inside one transaction */
  store: () => void
  /** What is left to do once everything is stored, before the answer leaves */
  stored?: () => Promise<void>
}

/**
 * Answers a creating request: what `create` makes is stored as one transaction before the answer leaves.
 * With an Idempotency-Key the first answer is kept and given again; the same key with another request is
 * refused with 409. A body that was not parsed is told by its `digest`.
 */
export async function answerCreation(
  request: FastifyRequest,
  reply: FastifyReply,
  store: Store,
  create: () => Creation | Promise<Creation>,
  bodyDigest?: Buffer,
): Promise<FastifyReply> {
  const key = request.headers['idempotency-key']
  if (typeof key !== 'string') {
    const creation = await create()
    await store.commit(creation.store)
    await creation.stored?.()
    return send(reply, creation.location, JSON.stringify(creation.answer))
  }

  const digest = digestOf(request, bodyDigest)
  const known = firstAnswer(store, key, digest)
  if (known) return send(reply, known.location, known.answer)
  const { location, answer, store: write, stored } = await create()
  const text = JSON.stringify(answer)
  let afterwards = undefined as Creation['stored']
  let answered: { location: string | null; answer: string } = { location, answer: text }
  await store.commit(() => {
    // The same request may have been answered while this one was being worked out.
    const other = firstAnswer(store, key, digest)
    if (other) {
      answered = other
      return
    }
    write()
    afterwards = stored
    const createdAt = new Date().toISOString()
    store.firstAnswers.insert({ key, digest, location, answer: text, createdAt })
  })
  await afterwards?.()
  return send(reply, answered.location, answered.answer)
}

function firstAnswer(store: Store, key: string, digest: Buffer) {
  const known = store.firstAnswers.get(key)
  if (known && !known.digest.equals(digest)) {
    throw new Problem(409, 'This Idempotency-Key was used for another request: take a new key.')
  }
  return known
}

function digestOf(request: FastifyRequest, bodyDigest: Buffer | undefined): Buffer {
  const body = bodyDigest ?? request.body
  return createHash('sha256')
    .update(`${request.method} ${request.url}\n`)
    .update(Buffer.isBuffer(body) ? body : JSON.stringify(body))
    .digest()
}

function send(reply: FastifyReply, location: string | null, answer: string): FastifyReply {
  if (location !== null) reply.header('location', location)
  return reply.status(201).type('application/json; charset=utf-8').send(answer)
}
