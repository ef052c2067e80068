/** Edits between circuits: a tube to another supply, and the way back to a supply's midpoint. */

import { leavingEnd, partOf } from '../layout/ends.js'
import type { Grounding } from '../layout/layout.js'
import { clearMidpointReturn, jointAt, moveToCircuit, setMidpointReturn } from '../wiring/circuit-edits.js'
import { placeOf } from '../wiring/edits.js'
import { footUnderCursor } from './aim.js'
import { endNear, figureTyped, tubeUnderCursor, withWiring } from './editing.js'
import { type Next, type State, say } from './state.js'

/** Circuits that a tube can go to: all but its own. */
export const otherCircuits = ({ present }: State, tube: string): number[] => {
  const { wiring } = present.sign
  const own = placeOf(wiring, tube)?.circuit
  return [...wiring.circuits.keys()].filter((circuit) => circuit !== own)
}

/** Hangs a tube behind the tube of the circuit whose far end is nearest to one of its ends, which it is entered at. */
export function tubeMoved(state: State, tube: string, circuit: number): Next {
  const { wiring } = state.present.sign
  const supply = wiring.circuits[circuit]?.supply ?? ''
  const place = nearestPlace(state, tube, circuit)
  const measured = [circuit, placeOf(wiring, tube)?.circuit ?? -1].some((c) => wiring.circuits[c]?.measured)
  const behind = place.behind === undefined ? '' : `, behind ${place.behind}`
  const gone = measured ? '; what was measured on other strings goes' : ''
  return withWiring(
    state,
    moveToCircuit(wiring, tube, { circuit, ...place }),
    `${tube} to ${supply}${behind}${gone}`,
  )
}

function nearestPlace(state: State, tube: string, circuit: number): { behind?: string; reversed: boolean } {
  const [a, b] = [endPoint(state, `${tube}.a`), endPoint(state, `${tube}.b`)]
  let best: { behind?: string; reversed: boolean } = { reversed: false }
  let least = Infinity
  for (const entry of state.present.sign.wiring.circuits[circuit]?.string ?? []) {
    const end = endPoint(state, leavingEnd(entry))
    for (const [own, reversed] of [
      [a, false],
      [b, true],
    ] as const) {
      if (!own || !end) continue
      const distance = Math.hypot(own[0] - end[0], own[1] - end[1], own[2] - end[2])
      if (distance >= least) continue
      least = distance
      best = { behind: entry.tube, reversed }
    }
  }
  return best
}

/** Where the electrode of a tube end (`K.a`) is, m. */
function endPoint({ prepared }: State, end: string): readonly [number, number, number] | undefined {
  const line = prepared.tubes.find(({ name }) => name === partOf(end))?.line
  if (!line) return undefined
  const at = end.endsWith('.a') ? 0 : line.points.length - 3
  return [line.points[at]!, line.points[at + 1]!, line.points[at + 2]!]
}

/** Leads the joint nearest to the cursor back to the midpoint; where that is done already, takes it away. */
export function midpointReturnHere(state: State): Next {
  const { layout, wiring } = state.present.sign
  const end = endAtCursor(state)
  if (end === undefined)
    return say(state, 'A midpoint return hangs on a joint: move the cursor onto glass or a jumper.', 'bad')
  const index = placeOf(wiring, partOf(end))?.circuit ?? 0
  const circuit = wiring.circuits[index]!
  const back = circuit.midpointReturn
  const joint = jointAt(circuit, end)
  if (back !== undefined && joint !== undefined && jointAt(circuit, back) === joint)
    return withWiring(state, clearMidpointReturn(wiring, index), `no midpoint return of ${circuit.supply}`)
  return withWiring(
    state,
    setMidpointReturn(layout, wiring, end),
    `midpoint return of ${circuit.supply} at ${end}`,
  )
}

/** The tube end nearest to the cursor; on a jumper, the end it comes from. */
function endAtCursor(state: State): string | undefined {
  const foot = footUnderCursor(state)
  if (foot?.body.kind === 'lead') {
    const { places } = state.inspection
    const place = places[foot.body.index]
    return place?.role === 'jumper' ? place.between[0] : undefined
  }
  const near = endNear(state, foot)
  if (near !== undefined) return near
  const tube = tubeUnderCursor(state)
  return tube === undefined ? undefined : `${tube}.a`
}

/** A supply that a joint goes back to keeps its midpoint. */
export function groundingChosen(state: State, supply: string, grounding: Grounding): Next {
  const circuit = state.present.sign.wiring.circuits.find((c) => c.supply === supply)
  return grounding !== 'midpoint' && circuit?.midpointReturn !== undefined
    ? say(
        state,
        `${circuit.midpointReturn} goes back to the midpoint of ${supply}: take that away first (R).`,
        'bad',
      )
    : figureTyped(state, supply, { grounding })
}
