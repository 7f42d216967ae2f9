import { type FastifyReply } from 'fastify'

/** A comment goes out this often, so that nobody on the way takes the connection for dead, ms. */
const HEARTBEAT = 15_000

/** A reader that leaves more than this unread is let go, bytes; it can resume. */
const MOST_UNREAD = 1_000_000

/** One answer of server-sent events (WHATWG HTML, "Server-sent events"). */
export interface EventStream {
  /** Sends one event; `id` is what a reader resumes after. */
  send: (event: string, json: string, id?: string) => void
  end: () => void
  /** Calls back once, when the reader is gone or the stream has ended. */
  onClose: (closed: () => void) => void
}

/** The streams that are open. A server that stops ends them, since it waits for every answer. */
export class EventStreams {
  private readonly open = new Set<EventStream>()

  /** Turns an answer into a stream of events. */
  start(reply: FastifyReply): EventStream {
    reply.hijack()
    const { raw } = reply
    raw.writeHead(200, {
      'content-type': 'text/event-stream; charset=utf-8',
      'cache-control': 'no-store',
      'x-accel-buffering': 'no',
      vary: 'accept',
    })
    raw.flushHeaders()
    const write = (text: string) => {
      if (raw.writableLength > MOST_UNREAD) raw.destroy()
      else raw.write(text)
    }
    const heartbeat = setInterval(write, HEARTBEAT, ': still here\n\n')
    const stream: EventStream = {
      send: (event, json, id) => {
        write(`${id === undefined ? '' : `id: ${id}\n`}event: ${event}\ndata: ${json}\n\n`)
      },
      end: () => {
        raw.end()
      },
      onClose: (closed) => raw.once('close', closed),
    }
    this.open.add(stream)
    stream.onClose(() => {
      clearInterval(heartbeat)
      this.open.delete(stream)
    })
    return stream
  }

  /** Ends every stream. */
  close(): void {
    for (const stream of this.open) stream.end()
  }
}
