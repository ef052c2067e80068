/** Edits between circuits and of the way back to a supply's midpoint: pure functions, as in edits.ts. */
import { enteringEnd, leavingEnd, partOf } from '../layout/ends.js'
import type { CircuitWiring, EndName, Layout, Wiring } from '../layout/layout.js'
import { done, type Edit, refused } from './edit.js'
import { placeOf, restrung } from './edits.js'

/** Where a tube goes: behind a tube of the circuit, or at the end of its string, entered at a or at b. */
export interface NewPlace {
  readonly circuit: number
  readonly behind?: string
  readonly reversed: boolean
}

/**
 * Moves a tube to another circuit. What was measured on either circuit was measured on other glass than it has now:
 * it goes.
 */
export function moveToCircuit(wiring: Wiring, tube: string, to: NewPlace): Edit<Wiring> {
  const found = placeOf(wiring, tube)
  const from = found && wiring.circuits[found.circuit]
  const target = wiring.circuits[to.circuit]
  if (!from) return refused({ code: 'no-such-part', part: tube })
  if (!target) return refused({ code: 'no-such-part', part: `circuit ${to.circuit + 1}` })
  if (target === from)
    return refused({ code: 'nothing-to-change', what: `${tube} hangs on ${target.supply} already` })
  if (from.string.length === 1) return refused({ code: 'empty-circuit', supply: from.supply, tube })
  const { behind = target.string.at(-1)?.tube, reversed } = to
  const before = target.string.findIndex((entry) => entry.tube === behind)
  if (before < 0) return refused({ code: 'no-such-part', part: behind ?? target.supply })
  const longer = [
    ...target.string.slice(0, before + 1),
    { tube, reversed },
    ...target.string.slice(before + 1),
  ]
  const shorter = from.string.filter((entry) => entry.tube !== tube)
  return done({
    circuits: wiring.circuits.map((circuit) =>
      circuit === target
        ? restrung(unmeasured(target), longer)
        : circuit === from
          ? restrung(unmeasured(from), shorter)
          : circuit,
    ),
  })
}

const unmeasured = ({ measured: _, ...rest }: CircuitWiring): CircuitWiring => rest

/** The jumper of a circuit that an end is joined to, counted as links are (edits.ts); undefined at a feed lead. */
export function jointAt({ string }: CircuitWiring, end: EndName): number | undefined {
  const at = string.findIndex((entry) => enteringEnd(entry) === end)
  const link = at >= 0 ? at : string.findIndex((entry) => leavingEnd(entry) === end) + 1
  return link > 0 && link < string.length ? link : undefined
}

/** Leads the joint at a tube end back to the midpoint of its supply. */
export function setMidpointReturn(layout: Layout, wiring: Wiring, end: EndName): Edit<Wiring> {
  const tube = partOf(end)
  const index = placeOf(wiring, tube)?.circuit
  const circuit = index === undefined ? undefined : wiring.circuits[index]
  if (!circuit) return refused({ code: 'no-such-part', part: tube })
  const { supply, midpointReturn } = circuit
  if (layout.supplies.find(({ id }) => id === supply)?.grounding !== 'midpoint')
    return refused({ code: 'no-midpoint', supply })
  const joint = jointAt(circuit, end)
  if (joint === undefined) return refused({ code: 'no-joint', end })
  if (midpointReturn !== undefined && jointAt(circuit, midpointReturn) === joint)
    return refused({ code: 'nothing-to-change', what: `${end} goes back to the midpoint already` })
  return done(withReturn(wiring, circuit, end))
}

/** Takes the way back to the midpoint away. */
export function clearMidpointReturn(wiring: Wiring, index: number): Edit<Wiring> {
  const circuit = wiring.circuits[index]
  if (!circuit) return refused({ code: 'no-such-part', part: `circuit ${index + 1}` })
  if (circuit.midpointReturn === undefined)
    return refused({ code: 'nothing-to-change', what: `${circuit.supply} has no midpoint return` })
  return done(withReturn(wiring, circuit, undefined))
}

function withReturn(wiring: Wiring, circuit: CircuitWiring, end: EndName | undefined): Wiring {
  const { midpointReturn: _, ...rest } = circuit
  const changed: CircuitWiring = end === undefined ? rest : { ...rest, midpointReturn: end }
  return { circuits: wiring.circuits.map((one) => (one === circuit ? changed : one)) }
}
