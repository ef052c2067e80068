/**
 * Why a pair is judged as it is: the number derived step by step in the technician's terms, from the terminal to the
 * verdict. The same text on the screen and from `check --why`.
 */
import { magnitude } from '../math/complex.js'
import { lawBand } from '../network/lit.js'
import { nodeMix, rmsDifference } from '../network/potentials.js'
import type { PotentialField } from '../network/solution.js'
import { type DifferenceSteps, differenceSteps } from '../network/string-walk.js'
import type { PairFinding } from '../rules/findings.js'
import type { Explanation, ExplanationPart } from './explanation.js'
import { airPart, openPart, rulesPart, startPart, verdictPart } from './why-gap.js'
import { fieldParts, visible, type WhySign } from './why-walk.js'
import { kv2, length, ma, percent, placeText } from './words.js'

export interface Derivation extends Explanation {
  /** the phasors that the lines show, one for each supply */
  readonly fields: readonly DifferenceSteps[]
}

export function why(sign: WhySign, pair: PairFinding): Derivation {
  const { layout, inspection } = sign
  const onLit = pair.judgedOn === 'lit' && inspection.lit !== undefined
  const opened = pair.judgedOn === 'broken'
  const fields = opened ? [] : stepsOf(sign, onLit ? (inspection.lit ?? []) : inspection.nameplate, pair)
  const walked = fields.flatMap((steps) => fieldParts(sign, pair, steps, onLit))
  const voltage = onLit
    ? [...walked, differencePart(sign, pair, fields), strayPart(sign, pair)]
    : [paperPart(sign, pair), ...walked, nameplatePart(pair, fields)]
  return {
    head: `Why ${placeText(pair.a, layout.units, 'long')} to ${placeText(pair.b, layout.units, 'long')}: gap ${length(pair.gap, layout.units)}`,
    parts: [
      ...(opened ? [] : voltage),
      openPart(sign, pair),
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

/** The sum of the steps, and why their kV do not add up as plain numbers where they do not. */
function differencePart(
  sign: WhySign,
  pair: PairFinding,
  fields: readonly DifferenceSteps[],
): ExplanationPart {
  const lit = pair.difference.lit ?? 0
  return {
    title: 'Difference',
    lines: [
      ...fields.flatMap((steps) => sumLines(steps)),
      ...togetherLines(fields, lit),
      `Difference of the two places: ${kv2(lit)} rms.`,
      ...bandLines(sign, pair),
    ],
  }
}

/** How the differences of several supplies make the whole. */
function togetherLines(fields: readonly DifferenceSteps[], volts: number): string[] {
  const each = fields.map((steps) => magnitude(steps.difference)).filter((one) => one >= visible)
  if (each.length < 2) return []
  const squares = Math.abs(Math.hypot(...each) - volts) < visible
  const way = squares ? 'they are not in step: their squares add' : 'they may be in step: they add'
  return [`The supplies together: ${each.map(kv2).join(' and ')} make ${kv2(volts)} rms (${way}).`]
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

function bandLines(
  { inspection }: WhySign,
  { difference: { lit, litLow, litHigh, litPeak } }: PairFinding,
): string[] {
  if (lit === undefined || litLow === undefined || litHigh === undefined || litPeak === undefined) return []
  const bands = inspection.circuits.map((c) => ({
    supply: c.supply,
    band: percent(lawBand(c.measured?.factor)),
  }))
  const same = bands.every(({ band }) => band === bands[0]?.band)
  const often = same ? bands[0]?.band : bands.map(({ supply, band }) => `${band} (${supply})`).join(', ')
  return [
    `How sure: the glass may take ${often} less or more than the law says: ${kv2(litLow)} to ${kv2(litHigh)} rms. Verdicts go by the upper end.`,
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
        const least = c.dimmest?.current ?? given
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
      ...togetherLines(fields, volts),
      `Difference on paper: ${kv2(volts)} rms, ${kv2(volts * Math.SQRT2)} peak (1.414 x rms).`,
    ],
  }
}
