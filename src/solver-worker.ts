/** The worker thread: prepares the capacitances of the glass and solves wirings, off the thread that reads keys. */
import { parentPort } from 'node:worker_threads'
import { inspection, type Prepared, prepare, preparedAgain, type Solved, solver } from './inspection.js'
import type { Layout, Wiring } from './layout/layout.js'
import { type LeadSaving, leadSavings } from './rules/lead-savings.js'
import { noRules } from './rules/resolve.js'

export interface SolveJob {
  readonly revision: number
  /** counts changes of the glass: as long as it stays, the prepared capacitances serve */
  readonly glass: number
  readonly layout: Layout
  readonly wiring: Wiring
  /** also what laying the output leads otherwise would give back: one solution more for each way */
  readonly leads?: boolean
}

export interface SolveAnswer {
  readonly revision: number
  readonly solved: Solved
  /** where they were asked for */
  readonly savings?: readonly LeadSaving[]
  /** what it took, ms */
  readonly prepareMs: number
  readonly solveMs: number
}

interface Ready {
  readonly glass: number
  readonly prepared: Prepared
  readonly solve: (wiring: Wiring, layout?: Layout) => Solved
}
let ready: Ready | undefined

parentPort?.on('message', (job: SolveJob) => {
  const start = performance.now()
  if (ready?.glass !== job.glass) {
    const prepared = prepare(job.layout, noRules)
    ready = { glass: job.glass, prepared, solve: solver(prepared) }
  }
  const preparedAt = performance.now()
  const layout = onKnownGlass(ready.prepared.layout, job.layout)
  const solved = ready.solve(job.wiring, layout)
  const answer: SolveAnswer = {
    revision: job.revision,
    solved,
    prepareMs: preparedAt - start,
    solveMs: performance.now() - preparedAt,
    ...(job.leads && { savings: savingsOf(ready, layout, job.wiring, solved) }),
  }
  parentPort?.postMessage(answer)
})

/** Rules have no say in it: the pairs tell where metal is near. */
function savingsOf(
  { prepared, solve }: Ready,
  layout: Layout,
  wiring: Wiring,
  solved: Solved,
): readonly LeadSaving[] {
  const found = inspection(preparedAgain(prepared, layout), wiring, solved)
  return leadSavings({ layout, ...found }, solved, (laid) => solve(wiring, laid))
}

/** A layout that crossed between threads is a copy: what did not change is put back as the values known here. */
function onKnownGlass(known: Layout, { supplies, ...layout }: Layout): Layout {
  const same = (i: number) =>
    JSON.stringify(known.supplies[i]?.terminals) === JSON.stringify(supplies[i]?.terminals)
  return {
    ...layout,
    tubes: known.tubes,
    metal: known.metal,
    face: known.face,
    routes: known.routes,
    supplies: supplies.map((s, i) => (same(i) ? { ...s, terminals: known.supplies[i]!.terminals } : s)),
  }
}
