/** A shipped sign, with everything the benchmarks run on. */
import { readFileSync } from 'node:fs'
import {
  type Inspection,
  inspection,
  type Prepared,
  prepare,
  type Solved,
  solver,
} from '../../src/inspection.js'
import type { Layout, Wiring } from '../../src/layout/layout.js'
import { parseLayout } from '../../src/layout/parse.js'

export interface BenchSign {
  readonly path: string
  readonly source: string
  readonly layout: Layout
}

export function benchSign(path: string): BenchSign {
  const source = readFileSync(path, 'utf8')
  return { path, source, layout: parsed(source, path) }
}

export function parsed(source: string, path: string): Layout {
  const { layout } = parseLayout(source, path)
  if (layout === undefined) throw new Error(`${path} cannot be used`)
  return layout
}

/** The two threads of the inspector in one: the screen's prepared sign, and the worker's own. */
export interface Bench {
  readonly prepared: Prepared
  readonly solve: (wiring: Wiring) => Solved
}

export const bench = (layout: Layout): Bench => ({
  prepared: prepare(layout),
  solve: solver(prepare(layout)),
})

/** A number that every part of the answers has gone into. */
export function inspectionSum({ circuits, pairs, cautions }: Inspection): number {
  const volts = circuits.reduce((sum, c) => sum + (c.neededVoltage ?? 0), 0)
  return pairs.reduce((sum, { severity }) => sum + severity, volts / 1000 + cautions.length)
}

export const answered = ({ prepared, solve }: Bench, wiring: Wiring): Inspection =>
  inspection(prepared, wiring, solve(wiring))
