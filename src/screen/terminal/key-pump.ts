/**
 * Stands between the keyboard and the program: one key at a time, the next only after everything that the
 * last one set off has been drawn. Without it a burst (a held key over a slow link) reaches handlers that
 * still hold the state from before the burst.
 *
 * A key goes to `onKey` first. Where that answers false – a text prompt has the focus – it goes on to Ink
 * through `stream`, so the program's reducer and Ink's widgets take keys from one queue.
 */
import { EventEmitter } from 'node:events'
import { type Key, keyDecoder, type Paste } from './key-decoder.js'
import { listening, standIn } from './stand-in.js'

/** What the pump needs of the keyboard. Raw mode is the screen's business (open-screen.ts). */
export interface KeySource {
  on(event: 'data', listener: (chunk: Uint8Array | string) => void): unknown
  off(event: 'data', listener: (chunk: Uint8Array | string) => void): unknown
  resume(): unknown
  pause(): unknown
}

export interface KeyHandlers {
  /** answers whether it took the key; `name` as in key-names.ts */
  onKey?(name: string, sequence: string): boolean
  /** answers whether it took the text; otherwise Ink gets it as one line without control characters */
  onPaste?(text: string): boolean
}

export interface KeyPump<Source> {
  /** for Ink's `stdin` */
  readonly stream: Source
  start(): void
  stop(): void
  /** keys read but not yet delivered */
  waiting(): number
}

// React renders in a later turn of the event loop, its effects run in one more, and effects may set state again
const turnsPerKey = 8

export function keyPump<Source extends KeySource>(source: Source, handlers: KeyHandlers): KeyPump<Source> {
  const decoder = keyDecoder()
  const readers = new EventEmitter()
  let queue: (Key | Paste)[] = []
  let busy = false
  let timer: NodeJS.Timeout | undefined
  // what Ink may read now
  let readable: string | null = null

  function receive(chunk: Uint8Array | string): void {
    enqueue(decoder.push(chunk))
    clearTimeout(timer)
    const wait = decoder.holdMs()
    if (wait !== undefined) timer = setTimeout(() => enqueue(decoder.release()), wait)
  }

  function enqueue(strokes: readonly (Key | Paste)[]): void {
    for (const stroke of strokes) {
      // as at a shell prompt, an interrupt overtakes what was typed before it
      if (stroke.kind === 'key' && stroke.name === 'ctrl-c') queue = []
      queue.push(stroke)
    }
    if (!busy) deliverNext()
  }

  function deliverNext(): void {
    const stroke = queue.shift()
    busy = stroke !== undefined
    if (stroke === undefined) return
    afterTurns(turnsPerKey, deliverNext)
    if (stroke.kind === 'key') {
      if (!handlers.onKey?.(stroke.name, stroke.sequence)) offer(stroke.sequence)
    } else if (!handlers.onPaste?.(stroke.text)) offer(oneLine(stroke.text))
  }

  function offer(text: string): void {
    readable = text === '' ? null : text
    readers.emit('readable')
    readable = null
  }

  function read(): string | null {
    const text = readable
    readable = null
    return text
  }

  return {
    stream: keyStream(source, readers, read),
    start() {
      source.on('data', receive)
      source.resume()
    },
    stop() {
      clearTimeout(timer)
      queue = []
      source.off('data', receive)
      source.pause()
    },
    waiting: () => queue.length,
  }
}

function afterTurns(turns: number, next: () => void): void {
  setImmediate(() => (turns > 1 ? afterTurns(turns - 1, next) : next()))
}

const oneLine = (text: string): string => text.replace(/\s+/g, ' ').replace(/[\x00-\x1f\x7f-\x9f]/g, '')

/** The keyboard as Ink sees it. Raw mode and keeping the process alive stay with the program. */
function keyStream<Source extends KeySource>(
  source: Source,
  readers: EventEmitter,
  read: () => string | null,
): Source {
  const stays = () => undefined
  return standIn(source, {
    isTTY: true,
    read,
    setEncoding: stays,
    setRawMode: stays,
    ref: stays,
    unref: stays,
    pause: stays,
    resume: stays,
    ...listening(readers),
  })
}
