/** Ends of a terminal that are not there, for tests that need no real one. */
import { EventEmitter } from 'node:events'
import { listening, standIn } from '../../../src/screen/terminal/stand-in.js'

/** A screen that keeps what is written; while `takes` is false it asks the writer to wait for `drain()`. */
export function fakeOutput(columns = 20, rows = 5) {
  const emitter = new EventEmitter()
  const state = { columns, rows, takes: true }
  const written: string[] = []
  const stream = standIn(process.stdout, {
    isTTY: true,
    get columns() {
      return state.columns
    },
    get rows() {
      return state.rows
    },
    write(text: string) {
      written.push(text)
      return state.takes
    },
    ...listening(emitter),
  })
  return {
    stream,
    written,
    state,
    drain: () => void emitter.emit('drain'),
    resize(newColumns: number, newRows: number) {
      state.columns = newColumns
      state.rows = newRows
      emitter.emit('resize')
    },
  }
}

/** A keyboard: `type` arrives as one read. */
export function fakeInput() {
  const emitter = new EventEmitter()
  const putBack: string[] = []
  const stream = standIn(process.stdin, {
    isTTY: true,
    resume: () => undefined,
    pause: () => undefined,
    unshift: (chunk: Uint8Array) => void putBack.push(Buffer.from(chunk).toString()),
    ...listening(emitter),
  })
  return { stream, putBack, type: (chunk: string | Uint8Array) => void emitter.emit('data', chunk) }
}
