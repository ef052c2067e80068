/**
 * The terminal as a full screen: alternate screen, no cursor, bracketed paste, raw keys – and all of it undone
 * on every way out. Exit status: as given to `end`, 128 + n for signal n, 70 for an internal error.
 */
import type { EventEmitter } from 'node:events'
import { constants } from 'node:os'
import { jobControl } from './job-control.js'
import { keepMessages } from './kept-messages.js'
import { writeNow } from './write-now.js'

/** How the program ends: a status, or the signal that ended it (Ctrl-C is 'SIGINT'), or a bug. */
export type Ending = number | EndingSignal | 'crash'
export type EndingSignal = (typeof endingSignals)[number]

export interface ScreenHooks {
  /** called once, before the screen is left, for work that must not be lost; what it prints appears afterwards */
  onLeave?(ending: Ending): void
  /** the program was stopped and goes on: the terminal shows nothing of ours any more */
  onResume?(): void
}

export interface Screen {
  /** stops the program like Ctrl-Z at a shell prompt; goes on with `onResume` */
  suspend(): void
  /** back to the normal screen; the program goes on and its signals are the system's again */
  leave(): void
  /** leaves and ends the process */
  end(ending: number | EndingSignal): never
}

const endingSignals = ['SIGINT', 'SIGTERM', 'SIGHUP', 'SIGQUIT'] as const
const crashStatus = 70
const enterCodes = '\x1b[?1049h\x1b[?25l\x1b[?2004h'
// cleared first, for terminals without an alternate screen
const leaveCodes = '\x1b[?2026l\x1b[m\x1b[H\x1b[J\x1b[?2004l\x1b[?25h\x1b[?1049l'

/** Takes the terminal. The streams stay with the caller: the screen is drawn through a frame sink. */
export function openScreen(
  hooks: ScreenHooks = {},
  input: EventEmitter & { setRawMode(raw: boolean): unknown } = process.stdin,
  output: EventEmitter & { readonly fd: number } = process.stdout,
): Screen {
  const messages = keepMessages()
  let shown = false
  let left = false

  function show(): void {
    shown = true
    // the terminal may be gone
    attempt(() => input.setRawMode(true))
    writeNow(output.fd, enterCodes)
  }

  function hide(): void {
    shown = false
    writeNow(output.fd, leaveCodes)
    attempt(() => input.setRawMode(false))
  }

  function leave(ending: Ending): void {
    if (left) return
    left = true
    const failure = attempt(() => hooks.onLeave?.(ending))
    if (shown) hide()
    writeNow(2, messages.release() + failure)
    job.release()
    for (const release of listeners) release()
  }

  function end(ending: Ending, complaint = ''): never {
    leave(ending)
    writeNow(2, complaint)
    // with the terminal gone, exiting would trip over it (Node resets its modes): let the signal itself end us
    if (ending === 'SIGHUP') process.kill(process.pid, 'SIGHUP')
    process.exit(statusOf(ending))
  }

  const job = jobControl(hide, () => {
    show()
    hooks.onResume?.()
  })
  const crash = (error: unknown) => end('crash', internalError(error))
  const hangUp = () => end('SIGHUP')
  const listeners = [
    ...endingSignals.map((signal) => listen(process, signal, () => end(signal))),
    listen(process, 'exit', (status) => leave(typeof status === 'number' ? status : 0)),
    listen(process, 'uncaughtException', crash),
    listen(process, 'unhandledRejection', crash),
    // the other end was closed without a signal
    listen(input, 'end', hangUp),
    listen(input, 'error', hangUp),
    listen(output, 'error', hangUp),
  ]
  show()
  return { suspend: job.suspend, leave: () => leave(0), end }
}

/** Listens until the answer is called. */
function listen(emitter: EventEmitter, event: string, listener: (argument: unknown) => void): () => void {
  emitter.on(event, listener)
  return () => emitter.off(event, listener)
}

/** Does it, and answers with the complaint if that fails. */
function attempt(act: () => void): string {
  try {
    act()
    return ''
  } catch (error) {
    return internalError(error)
  }
}

function statusOf(ending: Ending): number {
  if (typeof ending === 'number') return ending
  return ending === 'crash' ? crashStatus : 128 + constants.signals[ending]
}

const internalError = (error: unknown): string =>
  `internal error: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}\n`
