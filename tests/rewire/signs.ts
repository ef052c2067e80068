import { inspection, type Prepared, prepare, type Solved, solver } from '../../src/inspection.js'
import type { Layout, Wiring } from '../../src/layout/layout.js'
import { type Rewired, type RewireOptions, rewire } from '../../src/rewire/rewire.js'
import { resolveRules } from '../../src/rules/resolve.js'
import { layoutOf } from '../rules/signs.js'
import { type Row, rowText } from './row-text.js'

export type { Row } from './row-text.js'

export const row = (of: Row): Layout => layoutOf(rowText(of))

export interface Sought {
  readonly prepared: Prepared
  readonly solve: (wiring: Wiring) => Solved
  readonly rewired: Rewired
}

export function sought(layout: Layout, options: RewireOptions = {}): Sought {
  const prepared = prepare(layout, resolveRules(layout.rules))
  const solve = solver(prepared)
  const search = rewire(prepared, solve, options)
  for (let step = search.next(); ; step = search.next())
    if (step.done === true) return { prepared, solve, rewired: step.value }
}

export const inspected = ({ prepared, solve }: Pick<Sought, 'prepared' | 'solve'>, wiring: Wiring) =>
  inspection(prepared, wiring, solve(wiring))

/** Every order of a list. */
export const orders = <T>(list: readonly T[]): T[][] =>
  list.length === 0
    ? [[]]
    : list.flatMap((first, k) =>
        orders([...list.slice(0, k), ...list.slice(k + 1)]).map((rest) => [first, ...rest]),
      )

/** Every wiring of the first circuit: all orders, every tube either way. */
export function everyWiring({ circuits: [circuit, ...others] }: Wiring): Wiring[] {
  if (!circuit) return []
  return orders(circuit.string.map(({ tube }) => tube)).flatMap((order) =>
    Array.from({ length: 2 ** order.length }, (_, turns) => ({
      circuits: [
        { ...circuit, string: order.map((tube, k) => ({ tube, reversed: ((turns >> k) & 1) === 1 })) },
        ...others,
      ],
    })),
  )
}
