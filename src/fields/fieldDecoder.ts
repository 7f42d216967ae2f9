import { Piscina } from 'piscina'
import { type DecodingOrder, type Unreadable } from './decodingWorker.ts'
import { type FieldHeader } from './fieldHeader.ts'
import { GribError } from './gribError.ts'

/** Decodes uploaded forecasts one after the other in a thread of its own, so that the event loop is free. */
export class FieldDecoder {
  private piscina: Piscina | undefined

  /**
   * Reads the file `upload` and stores the field in it at `path`, whole or not at all.
   * @throws GribError where it is damaged or is not air to fly in
   */
  async decode(upload: string, path: string): Promise<FieldHeader> {
    this.piscina ??= new Piscina({
      filename: workerModule(),
      execArgv: [],
      minThreads: 0,
      maxThreads: 1,
      idleTimeout: 60_000,
    })
    const order: DecodingOrder = { upload, path }
    const answer = (await this.piscina.run(order, { name: 'decode' })) as FieldHeader | Unreadable
    if ('problem' in answer) throw new GribError(answer.problem, answer.message)
    return answer
  }

  async close(): Promise<void> {
    await this.piscina?.destroy()
  }
}

/** The module that the thread loads: of the build itself, of the sources through the loader of development. */
function workerModule(): string {
  const built = !import.meta.url.endsWith('.ts')
  return new URL(built ? './decodingWorker.js' : './sourceWorker.js', import.meta.url).href
}
