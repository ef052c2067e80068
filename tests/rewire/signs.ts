import { inspection, type Prepared, prepare, type Solved, solver } from '../../src/inspection.js'
import type { Layout, Wiring } from '../../src/layout/layout.js'
import { type Rewired, type RewireOptions, rewire } from '../../src/rewire/rewire.js'
import { resolveRules } from '../../src/rules/resolve.js'
import { layoutOf } from '../rules/signs.js'

/** Numbers from 0 to below 1, the same in every run (linear congruence of Numerical Recipes). */
export function seeded(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0
    return state / 2 ** 32
  }
}

/** What a test says of a row of hooks. */
export interface Row {
  readonly tubes: number
  readonly seed?: number
  /** kV for each tube */
  readonly kv?: number
  readonly grounding?: 'midpoint' | 'one-end' | 'none'
  /** further keys of the supply */
  readonly supply?: string
  readonly rules?: string
}

/** A row of hooks of different heights, closer together than is good, strung in a wild order. */
export function rowText({
  tubes,
  seed = 1,
  kv = 0.8,
  grounding = 'midpoint',
  supply = '',
  rules,
}: Row): string {
  const random = seeded(seed)
  const between = (low: number, high: number) => Math.round(low + (high - low) * random())
  const lines = Array.from({ length: tubes }, (_, k) => {
    const [x, y] = [100 + 105 * k, between(60, 120)]
    const [foot, right] = [y + between(120, 260), x + between(45, 86)]
    const up = random() < 0.5 ? `, [${right}, ${y + 40}]` : ''
    return `  - {id: L${k + 1}, path: [[${x}, ${y}], [${x}, ${foot}], [${right}, ${foot}]${up}]}`
  })
  const names = Array.from({ length: tubes }, (_, k) => `L${k + 1}`)
  const string = names.map((name) => ({ name, at: random() })).sort((a, b) => a.at - b.at)
  return `layout: 1
title: row of ${tubes}
units: mm
altitude_m: 0
face: {size: [${105 * tubes + 200}, 600], metal: none}
defaults:
  tube: {diameter: 12, wall: 1, glass: lead, fill: neon, height: 40, boots: true}
  lead: {conductor: 1.2, diameter: 7, insulation: silicone, height: -20}
tubes:
${lines.join('\n')}
supplies:
  - {id: S1, type: electronic, no_load_kv: ${(kv * tubes + 1).toFixed(1)}, short_circuit_ma: 30, frequency_hz: 22000, grounding: ${grounding},
     open_circuit_protection: true, terminals: [[${50 * tubes}, 560, -20], [${50 * tubes + 60}, 560, -20]]${supply}}
circuits:
  - {supply: S1, string: [${string.map(({ name }) => name).join(', ')}]}
rules: [${rules ?? 'common-practice'}]
`
}

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
