import { spawn, type ChildProcess } from 'node:child_process'
import { once } from 'node:events'
import { createInterface } from 'node:readline'

const MAIN = new URL('../../dist/main.js', import.meta.url).pathname

/** The built program, running in a process of its own. */
export interface StartedServer {
  process: ChildProcess
  /** http://127.0.0.1:… */
  address: string
  /** Lines printed up to and with the address */
  printed: string[]
}

/** Starts the program on a free port, as `npm start` does; resolves when it has printed its address. */
export async function startServer(environment: Record<string, string>): Promise<StartedServer> {
  const child = spawn(process.execPath, [MAIN], {
    env: { ...process.env, HOST: '127.0.0.1', PORT: '0', LOG_LEVEL: 'error', ...environment },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  let complaint = ''
  child.stderr.on('data', (chunk: Buffer) => (complaint += chunk.toString()))
  const printed: string[] = []
  for await (const line of createInterface(child.stdout)) {
    printed.push(line)
    const address = /serves on (http:\/\/\S+)/.exec(line)?.[1]
    if (address) return { process: child, address, printed }
  }
  throw new Error(`the server did not start: ${complaint}`)
}

/** Ends a process with a signal and waits until it is gone. */
export async function end({ process: child }: StartedServer, signal: NodeJS.Signals) {
  const gone = once(child, 'exit')
  child.kill(signal)
  await gone
}
