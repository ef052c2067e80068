/**
 * Why a pair is judged as it is: the number derived step by step in the technician's terms, from the terminal to the
 * verdict. The same text on the screen and from `check --why`.
 */
import type { Inspection } from '../inspection.js'
import type { Layout } from '../layout/layout.js'
import { type Complex, degrees, magnitude } from '../math/complex.js'
import { nodeMix, rmsDifference } from '../network/potentials.js'
import type { PotentialField } from '../network/solution.js'
import { type DifferenceSteps, differenceSteps, type Leg, type WalkStep } from '../network/string-walk.js'
import type { PairFinding, Spot } from '../rules/findings.js'
import type { Explanation, ExplanationPart } from './explanation.js'
import { airPart, openPart, rulesPart, startPart, verdictPart } from './why-gap.js'
import { kv2, length, ma, percent } from './words.js'

export interface Derivation extends Explanation {
  /** the phasors that the lines show, one for each supply */
  readonly fields: readonly DifferenceSteps[]
}

/** what shows in figures with a hundredth of a kilovolt, V */
const visible = 5

/** What a derivation is made of. */
export interface WhySign {
  readonly layout: Layout
  readonly inspection: Inspection
}

export function why(sign: WhySign, pair: PairFinding): Derivation {
  const { layout, inspection } = sign
  const onLit = pair.judgedOn === 'lit' && inspection.lit !== undefined
  const opened = pair.judgedOn === 'broken'
  const fields = opened ? [] : stepsOf(sign, onLit ? (inspection.lit ?? []) : inspection.nameplate, pair)
  const walked = fields.flatMap((steps) => fieldParts(sign, pair, steps, onLit))
  const voltage = onLit
    ? [...walked, differencePart(pair, fields), strayPart(sign, pair)]
    : [paperPart(sign, pair), ...walked, nameplatePart(pair, fields)]
  return {
    head: `Why ${placeName(pair.a, sign)} to ${placeName(pair.b, sign)}: gap ${length(pair.gap, layout.units)}`,
    parts: [
      ...(opened ? [] : voltage),
      ...(pair.difference.broken > 0 ? [openPart(pair)] : []),
      airPart(sign, pair),
      startPart(sign, pair),
      rulesPart(sign, pair),
      verdictPart(sign, pair),
    ],
    fields,
  }
}

/** The steps in every field that has to do with the pair. */
function stepsOf(
  { layout, inspection }: WhySign,
  fields: readonly PotentialField[],
  { a, b }: PairFinding,
): DifferenceSteps[] {
  const walked = {
    wiring: inspection.wiring,
    tubeIds: layout.tubes.map(({ id }) => id),
    probe: inspection.probe,
  }
  return fields
    .map((field) => differenceSteps(walked, field, a, b))
    .filter((steps) => steps.first !== undefined || magnitude(steps.difference) > 0)
}

export const placeName = (spot: Spot, { layout }: WhySign): string =>
  spot.kind === 'face'
    ? 'the face'
    : spot.kind === 'metal'
      ? `metal ${spot.part}`
      : `${spot.kind === 'lead' ? 'lead ' : ''}${spot.part} at ${length(spot.at, layout.units)}`

/** `1.85 kV (-2°)`: against terminal 1 where it is a phasor, signed on paper */
function phasorText(value: Complex, terminal: Complex, onLit: boolean): string {
  if (!onLit) return `${value.re > 0 ? '+' : ''}${kv2(value.re)}`
  const volts = magnitude(value)
  if (volts < 5) return kv2(volts)
  const turned = Math.round(degrees(value) - degrees(terminal))
  // from -179 to 180
  return `${kv2(volts)} (${180 - ((((180 - turned) % 360) + 360) % 360)}°)`
}

function fieldParts(
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
    `So ${placeName(spot, sign)} stands at ${phasorText(value, terminal, onLit)}.`
  return [
    {
      title: `From ${end} to ${placeName(one, sign)}`,
      lines: [start, ...legLines(sign, toFirst, terminal, steps, onLit), there(one, toFirst.end)],
    },
    onward
      ? {
          title: `On to ${placeName(two, sign)}`,
          lines: [...onwardLines(sign, onward, terminal, steps, onLit), there(two, onward.end)],
        }
      : {
          title: `The other place, ${placeName(two, sign)}`,
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
  const name = placeName(spot, sign)
  if (spot.kind === 'tube' || spot.kind === 'lead')
    return onLit
      ? `It is on another string; through the air ${supply} puts it at ${phasorText(value, terminal, true)}.`
      : `It is on another string, whose own potential counts beside that of ${supply}.`
  if (!onLit) return `${name} counts as 0 V on paper.`
  return magnitude(value) < 1e-6
    ? `${name} is at ground: 0 V.`
    : `${name} is not grounded: it floats to ${phasorText(value, terminal, true)}.`
}

/** The sum of the steps, and why their kV do not add up as plain numbers where they do not. */
function differencePart(pair: PairFinding, fields: readonly DifferenceSteps[]): ExplanationPart {
  const lit = pair.difference.lit ?? 0
  const each = fields.map((steps) => magnitude(steps.difference)).filter((volts) => volts >= visible)
  const lines = fields.flatMap((steps) => sumLines(steps))
  if (each.length > 1) {
    const squares = Math.hypot(...each)
    const way =
      Math.abs(squares - lit) < visible
        ? 'they are not in step: their squares add'
        : 'they may be in step: they add'
    lines.push(`The supplies together: ${each.map(kv2).join(' and ')} make ${kv2(lit)} rms (${way}).`)
  } else lines.push(`Difference of the two places: ${kv2(lit)} rms.`)
  return { title: 'Difference', lines: [...lines, ...bandLines(pair)] }
}

function sumLines({ onward, toFirst, difference, atA, atB }: DifferenceSteps): string[] {
  const size = magnitude(difference)
  if (!onward) {
    if (!toFirst) return []
    const [one, two] = [magnitude(atA), magnitude(atB)]
    return two === 0 || one === 0 || Math.abs(Math.abs(one - two) - size) < visible
      ? []
      : [`The two potentials are not in step: ${kv2(one)} and ${kv2(two)} are ${kv2(size)} apart.`]
  }
  const drops = onward.steps.map(({ drop }) => magnitude(drop)).filter((volts) => volts > 0)
  if (drops.length < 2) return []
  const plain = drops.reduce((sum, volts) => sum + volts, 0)
  const listed = `The drops between them: ${drops.map((volts) => kv2(volts).replace(' kV', '')).join(' + ')}`
  return [
    kv2(plain) === kv2(size)
      ? `${listed} = ${kv2(plain)} (rounded).`
      : `${listed} would be ${kv2(plain)} as plain numbers; they are not in step (see their angles), so ${kv2(size)} is left.`,
  ]
}

function bandLines({ difference: { lit, litLow, litHigh, litPeak } }: PairFinding): string[] {
  if (lit === undefined || litLow === undefined || litHigh === undefined || litPeak === undefined) return []
  return [
    `How sure: the glass may take 30 % less or more than the default law says (5 % where the circuit was measured): ${kv2(litLow)} to ${kv2(litHigh)} rms. Verdicts go by the upper end.`,
    `At its worst instant the upper end is ${kv2(litPeak)} peak (1.414 x rms).`,
  ]
}

const ground = { low: -1, high: -1, t: 0 }

/** What would be there without stray capacitance, and what it changed. */
function strayPart({ inspection }: WhySign, pair: PairFinding): ExplanationPart {
  const { nameplate, probe, circuits } = inspection
  const [a, b] = [pair.a, pair.b].map((spot) => nodeMix(probe, spot.body, spot.at))
  const shared = Math.hypot(
    ...nameplate.map((field) => {
      const load = circuits.find((c) => c.supply === field.supply)?.load ?? 0
      return load * rmsDifference([field], a!, b!)
    }),
  )
  const lit = pair.difference.lit ?? 0
  const change = lit - shared
  const floats = [pair.a, pair.b].some(
    (spot, k) =>
      (spot.kind === 'metal' || spot.kind === 'face') &&
      rmsDifference(inspection.lit ?? [], k === 0 ? a! : b!, ground) > visible,
  )
  const concerned = circuits.filter((c) => c.lit && c.load !== undefined)
  return {
    title: 'What stray current changed',
    lines: [
      `On paper the no-load voltage shared out along the string gives ${kv2(pair.difference.nameplate)} here${floats ? ' (ungrounded metal counts as 0 V there)' : ''}.`,
      `The burning sign takes ${concerned.map((c) => `${percent(c.load ?? 0)} of what ${c.supply} has`).join(', ')}: by sharing alone ${kv2(shared)}.`,
      `Stray current, and the tubes it leaves with other currents, change that by ${change >= 0 ? '+' : ''}${kv2(change)}: ${kv2(lit)}.`,
      ...concerned.flatMap((c) => {
        const given = Math.max(...c.terminals.map((t) => magnitude(t.current)))
        const least = Math.min(...c.tubes.map((t) => t.least?.current ?? given))
        return [`Of ${ma(given)} from ${c.supply}, ${ma(least)} reach the dimmest place of its string.`]
      }),
    ],
  }
}

/** Why there is no lit figure, and what stands for it. */
function paperPart({ inspection }: WhySign, pair: PairFinding): ExplanationPart {
  const dark = inspection.circuits.filter((c) => c.solved && !c.lit)
  const reason =
    pair.difference.lit !== undefined
      ? `The lit sign has ${kv2(pair.difference.lit)} rms here; the condition asked for is nameplate.`
      : dark.length > 0
        ? `${dark.map((c) => c.supply).join(', ')} cannot light the string, so there is no lit figure.`
        : 'The lit solution is not there yet.'
  return {
    title: 'On paper',
    lines: [
      reason,
      'Nameplate: the no-load voltage shared out over the string, each tube by its drop at short-circuit current; no stray current.',
    ],
  }
}

function nameplatePart(pair: PairFinding, fields: readonly DifferenceSteps[]): ExplanationPart {
  const volts = pair.difference.nameplate
  return {
    title: 'Difference',
    lines: [
      ...fields.flatMap((steps) => sumLines(steps)),
      `Difference on paper: ${kv2(volts)} rms, ${kv2(volts * Math.SQRT2)} peak (1.414 x rms).`,
    ],
  }
}
