/** The first half of a derivation: the way from a terminal to the two places, as sentences with their phasors. */
import type { Inspection } from '../inspection.js'
import type { Layout } from '../layout/layout.js'
import { type Complex, degrees, magnitude } from '../math/complex.js'
import type { DifferenceSteps, Leg, WalkStep } from '../network/string-walk.js'
import type { PairFinding, Spot } from '../rules/findings.js'
import type { ExplanationPart } from './explanation.js'
import { kv2, length, ma, placeText } from './words.js'

/** what shows in figures with a hundredth of a kilovolt, V */
export const visible = 5

/** What a derivation is made of. */
export interface WhySign {
  readonly layout: Layout
  readonly inspection: Inspection
}

/** `1.85 kV (-2°)`: against terminal 1 where it is a phasor, signed on paper */
function phasorText(value: Complex, terminal: Complex, onLit: boolean): string {
  if (!onLit) return `${value.re > 0 ? '+' : ''}${kv2(value.re)}`
  const volts = magnitude(value)
  if (volts < 5) return kv2(volts)
  const turned = Math.round(degrees(value) - degrees(terminal))
  // from -179 to 180
  return `${kv2(volts)} (${180 - ((((180 - turned) % 360) + 360) % 360)}°)`
}

/** Titled lines for the field of one supply. */
export function fieldParts(
  sign: WhySign,
  pair: PairFinding,
  steps: DifferenceSteps,
  onLit: boolean,
): ExplanationPart[] {
  const { first, toFirst, onward, supply } = steps
  const spots = first === 'b' ? [pair.b, pair.a] : [pair.a, pair.b]
  const values = first === 'b' ? [steps.atB, steps.atA] : [steps.atA, steps.atB]
  const [one, two] = [spots[0]!, spots[1]!]
  if (!toFirst) {
    // what would not be seen in the figures is not told
    if (!onLit || magnitude(steps.difference) < visible) return []
    return [
      {
        title: `What ${supply} adds`,
        lines: [`Through the air it puts ${kv2(magnitude(steps.difference))} between the two places.`],
      },
    ]
  }
  const terminal = toFirst.start
  const end = `${supply}.1`
  const start = onLit
    ? `${end} stands at ${kv2(magnitude(terminal))} to ground; angles are against it, 180° is the opposite polarity.`
    : `${end} stands at ${phasorText(terminal, terminal, false)} to ground.`
  const there = (spot: Spot, value: Complex) =>
    `So ${placeText(spot, sign.layout.units, 'long')} stands at ${phasorText(value, terminal, onLit)}.`
  return [
    {
      title: `From ${end} to ${placeText(one, sign.layout.units, 'long')}`,
      lines: [start, ...legLines(sign, toFirst, terminal, steps, onLit), there(one, toFirst.end)],
    },
    onward
      ? {
          title: `On to ${placeText(two, sign.layout.units, 'long')}`,
          lines: [...onwardLines(sign, onward, terminal, steps, onLit), there(two, onward.end)],
        }
      : {
          title: `The other place, ${placeText(two, sign.layout.units, 'long')}`,
          lines: [otherLine(sign, two, values[1]!, terminal, supply, onLit)],
        },
  ]
}

function onwardLines(sign: WhySign, onward: Leg, terminal: Complex, steps: DifferenceSteps, onLit: boolean) {
  if (onward.steps.length === 0) return ['It is the same conductor: no drop between the two.']
  return legLines(sign, onward, terminal, steps, onLit)
}

/** Tube by tube; a lead is told with the current that leaves it sideways. */
function legLines(
  sign: WhySign,
  { steps }: Leg,
  terminal: Complex,
  { circuit }: DifferenceSteps,
  onLit: boolean,
): string[] {
  return steps.map((step) =>
    step.body.kind === 'lead'
      ? leadLine(sign, step, circuit, onLit)
      : tubeLine(sign, step, terminal, circuit, onLit),
  )
}

function leadLine({ layout, inspection }: WhySign, { body }: WalkStep, circuit: number, onLit: boolean) {
  const index = body.kind === 'lead' ? body.index : 0
  const lead = inspection.leads[index]!
  const own = inspection.places.slice(0, index).filter((place) => place.circuit === circuit).length
  const stray = onLit ? inspection.circuits[circuit]?.leads[own]?.stray : undefined
  const takes = stray === undefined ? '' : `, takes ${ma(stray)} of stray current`
  return `Lead ${lead.name}, ${length(lead.line.length, layout.units)}: drops nothing${takes}.`
}

function tubeLine(
  { layout, inspection }: WhySign,
  { body, from, to, drop, electrodes, reached }: WalkStep,
  terminal: Complex,
  circuit: number,
  onLit: boolean,
): string {
  const tube = inspection.context.bodies[body.kind === 'fixed' ? body.index : 0]!
  const whole = Math.abs(to - from) >= tube.line.length * (1 - 1e-9)
  const end = to <= 0 ? `${tube.name}.a` : to >= tube.line.length ? `${tube.name}.b` : undefined
  const where = whole
    ? `along its ${length(tube.line.length, layout.units)}`
    : `over ${length(Math.abs(to - from), layout.units)}`
  const electrode = magnitude(electrodes) > 0 ? `, ${kv2(magnitude(electrodes))} of it at the electrodes` : ''
  const atEntry = from <= 0 || from >= tube.line.length
  const current = onLit && atEntry ? currentAtEntry(inspection, circuit, tube.name, from < to) : undefined
  const carries = current === undefined ? '' : `, entered by ${ma(current)}`
  return (
    `${tube.name} drops ${phasorText(drop, terminal, onLit)} ${where}${electrode}${carries}: ` +
    `${phasorText(reached, terminal, onLit)} at ${end ?? length(to, layout.units)}.`
  )
}

/** current into the tube at the end where the string enters it, A */
function currentAtEntry({ circuits }: Inspection, circuit: number, tube: string, fromA: boolean) {
  const found = circuits[circuit]?.tubes.find(({ id }) => id === tube)
  const end = fromA ? found?.a : found?.b
  return end && magnitude(end.current)
}

function otherLine(
  sign: WhySign,
  spot: Spot,
  value: Complex,
  terminal: Complex,
  supply: string,
  onLit: boolean,
): string {
  const name = placeText(spot, sign.layout.units, 'long')
  if (spot.kind === 'tube' || spot.kind === 'lead')
    return onLit
      ? `It is on another string; through the air ${supply} puts it at ${phasorText(value, terminal, true)}.`
      : `It is on another string, whose own potential counts beside that of ${supply}.`
  if (!onLit) return `${name} counts as 0 V on paper.`
  return magnitude(value) < 1e-6
    ? `${name} is at ground: 0 V.`
    : `${name} is not grounded: it floats to ${phasorText(value, terminal, true)}.`
}
