/**
 * The inspector without a terminal: the reducer with a solver that answers at once.
 *
 *   const s = session('open-window')
 *   s.keys('f')                    // keys by their names; 'solve' effects are answered before the next key
 *   s.state().message?.text
 *   s.effects()                    // what else was asked of the world since the last call
 */
import { type LayoutFile, readLayoutFile } from '../../src/files.js'
import { type Prepared, prepare, type Solved, solver } from '../../src/inspection.js'
import type { Wiring } from '../../src/layout/layout.js'
import { type Event, reduce } from '../../src/screen/reduce.js'
import { initialState } from '../../src/screen/start.js'
import type { Effect, State } from '../../src/screen/state.js'

export interface Session {
  state(): State
  keys(...names: string[]): void
  /** types into the open prompt and submits */
  type(text: string): void
  send(event: Event): void
  /** asked of the world since the last call, 'solve' left out */
  effects(): Effect[]
  /** of all solutions asked for and not answered, answers the newest */
  answer(): void
}

export interface SessionOptions {
  readonly columns?: number
  readonly rows?: number
  readonly ascii?: boolean
  /** solutions wait for answer() */
  readonly slow?: boolean
}

export const shipped = (name: string): LayoutFile => {
  const read = readLayoutFile(`layouts/${name}.yaml`)
  if (!read.ok) throw new Error(read.complaint)
  return read.file
}

interface Ready {
  readonly prepared: Prepared
  readonly solve: (wiring: Wiring, layout?: Prepared['layout']) => Solved
}
// preparing the glass is the slow part: kept for all tests of a file
const opened = new Map<string, State>()
const solvers = new Map<Prepared['runs'], Ready>()

function openedState(name: string): State {
  const known = opened.get(name)
  if (known) return known
  const theme = { level: 8, ground: 'dark' } as const
  const first = initialState(shipped(name), { theme, ascii: false }, 80, 24)
  const state = reduce(first, { type: 'solved', revision: 0, solved: solution(first) }).state
  opened.set(name, state)
  return state
}

/** The lit solution of the sign on screen, as the worker would give it. */
export function solution({ prepared, present }: State): Solved {
  const known = solvers.get(prepared.runs)
  const ready = known ?? { prepared, solve: solver(prepare(prepared.layout)) }
  solvers.set(prepared.runs, ready)
  return ready.solve(present.sign.wiring, present.sign.layout)
}

export function session(name: string, options: SessionOptions = {}): Session {
  const { columns = 80, rows = 24, ascii = false, slow = false } = options
  let state: State = { ...openedState(name), columns, rows, ascii }
  let asked: Effect[] = []

  function send(event: Event): void {
    const next = reduce(state, event)
    state = next.state
    asked.push(...next.effects.filter((effect) => effect.do !== 'solve'))
    if (!slow && next.effects.some((effect) => effect.do === 'solve')) answer()
  }
  function answer(): void {
    if (state.solving) send({ type: 'solved', revision: state.revision, solved: solution(state) })
  }
  return {
    state: () => state,
    keys: (...names) => {
      for (const key of names) send({ type: 'key', key })
    },
    type(text) {
      send({ type: 'typed', text })
      send({ type: 'submitted', text })
    },
    send,
    effects() {
      const since = asked
      asked = []
      return since
    },
    answer,
  }
}
