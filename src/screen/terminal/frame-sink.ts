/**
 * Stands between Ink and the terminal. Ink (in debug mode) writes one whole frame at every commit;
 * the sink keeps the newest, lays the grids over it and sends the cells that changed.
 *
 *   const sink = frameSink(process.stdout)
 *   render(<App />, { stdout: sink.stream, debug: true, patchConsole: false, exitOnCtrlC: false })
 */
import { Buffer } from 'node:buffer'
import { EventEmitter } from 'node:events'
import { cellScreen } from './cell-screen.js'
import type { Grid } from './cells.js'
import { framePace } from './frame-pace.js'
import { listening, standIn } from './stand-in.js'

/** What the sink needs of the terminal: `write` answers false when no more should come before 'drain'. */
export interface ScreenOutput {
  readonly columns?: number
  readonly rows?: number
  write(text: string): boolean
  on(event: 'resize' | 'drain', listener: () => void): unknown
  off(event: 'resize' | 'drain', listener: () => void): unknown
}

export interface SinkCounts {
  /** frames that Ink delivered */
  readonly frames: number
  /** updates sent to the terminal, and their bytes */
  readonly updates: number
  readonly bytes: number
}

export interface FrameSink<Stream> {
  /** for Ink's `stdout`; emits 'resize' with `columns` and `rows` already new */
  readonly stream: Stream
  /**
   * Lays a grid over the frame, in the order in which ids first came; undefined takes it away.
   * Called in the same turn as the commit (before it, or in a layout effect) both appear together.
   */
  setOverlay(id: string, grid: Grid | undefined): void
  /** a key was pressed: the next frame goes out at once, unless the last such frame was just now */
  hurry(): void
  /** forgets what the terminal shows and draws everything anew */
  repaint(): void
  counts(): SinkCounts
  close(): void
}

const beginUpdate = '\x1b[?2026h'
const endUpdate = '\x1b[?2026l'
// cursor commands and line ends that come without a frame
const notAFrame = /^(?:\x1b\[[?<>=]?[\d;]*[A-Za-z]|\n)*$/

export function frameSink<Stream extends ScreenOutput>(out: Stream, framesPerSecond = 60): FrameSink<Stream> {
  const screen = cellScreen()
  const listeners = new EventEmitter()
  const pace = framePace(1000 / framesPerSecond, flush)
  const counts = { frames: 0, updates: 0, bytes: 0 }
  let frame: string | undefined
  let outdated = false
  // the terminal has not taken the last update yet
  let stalled = false

  function accept(text: string): void {
    frame = text
    counts.frames++
    request()
  }

  function request(): void {
    outdated = true
    // a terminal that does not read gets the newest frame when it reads again, and nothing in between
    if (!stalled) pace.request()
  }

  function flush(): void {
    if (frame === undefined) return
    outdated = false
    const changes = screen.update(frame, out.columns || 80, out.rows || 24)
    if (changes === '') return
    const update = beginUpdate + changes + endUpdate
    counts.updates++
    counts.bytes += Buffer.byteLength(update)
    stalled = !out.write(update)
  }

  function drained(): void {
    stalled = false
    if (outdated) pace.request()
  }

  function repaint(): void {
    screen.forget()
    pace.hurry()
    request()
  }

  function resized(): void {
    // Ink draws for the new size while it hears of it, so this comes before the repaint
    listeners.emit('resize')
    repaint()
  }

  out.on('drain', drained)
  out.on('resize', resized)

  return {
    stream: frameStream(out, listeners, accept),
    setOverlay(id, grid) {
      screen.setOverlay(id, grid)
      request()
    },
    hurry: pace.hurry,
    repaint,
    counts: () => ({ ...counts }),
    close() {
      pace.stop()
      out.off('drain', drained)
      out.off('resize', resized)
    },
  }
}

/** The terminal as Ink sees it: always a terminal, of a known size, and whole frames are all that it takes. */
function frameStream<Stream extends ScreenOutput>(
  out: Stream,
  listeners: EventEmitter,
  accept: (frame: string) => void,
): Stream {
  return standIn(out, {
    isTTY: true,
    get columns() {
      return out.columns || 80
    },
    get rows() {
      return out.rows || 24
    },
    write(text: unknown, ...rest: unknown[]) {
      if (typeof text === 'string' && !notAFrame.test(text)) accept(text)
      const done = rest.at(-1)
      if (typeof done === 'function') setImmediate(() => done())
      return true
    },
    ...listening(listeners),
  })
}
