import { stat } from 'node:fs/promises'
import { Readable } from 'node:stream'
import { v7 as uuid } from 'uuid'
import { type FieldShelf } from '../fetching/fetcher.ts'
import { type Context } from './context.ts'
import { fieldAnswer } from './fieldAnswer.ts'
import { now } from './flying.ts'
import { fieldRow } from './routes/fields.ts'

/** Makes fetched forecasts fields as an upload does, and removes them for newer ones. */
export function fieldShelf(
  context: Pick<Context, 'store' | 'airs' | 'fieldFiles' | 'watcher'>,
): FieldShelf {
  const { store, airs, fieldFiles, watcher } = context
  return {
    store: async (chunks, name) => {
      const id = uuid()
      try {
        await fieldFiles.receive(id, Readable.from(chunks))
        const answer = await fieldFiles.decode(id, (field) => fieldAnswer(field, id, name, now()))
        await store.commit(() => {
          store.fields.insert(fieldRow(answer))
          watcher.fieldArrived(answer)
        })
        await fieldFiles.keep(id)
        watcher.wake()
        return { id, bytes: (await stat(fieldFiles.path(id))).size }
      } finally {
        await fieldFiles.discard(id)
      }
    },
    remove: async (id) => {
      if (store.fields.uses(id).flights > 0) return false // a plan names it
      await store.commit(() => {
        store.fields.release(id) // runs keep their answer and track, which is all that they are
        store.fields.remove(id)
      })
      airs.forgetField(id)
      await fieldFiles.remove(id)
      return true
    },
  }
}
