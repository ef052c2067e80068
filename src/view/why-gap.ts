/** The second half of a derivation: from the difference to the verdict. Lengths of walls in mm, others as the layout. */
import { airDensity, effectivePressureBar, frequencyFactor } from '../gaps/air.js'
import { streamerStart, uniformBreakdown } from '../gaps/discharge.js'
import { airShare, facingLine, type Surface } from '../gaps/facing-line.js'
import { type Gap, type GapStart, gapStart } from '../gaps/gap-stress.js'
import { brokenPotential, openTubes } from '../network/broken.js'
import { nodeMix } from '../network/potentials.js'
import type { PairFinding, RuleFinding, Spot } from '../rules/findings.js'
import { gapBetween } from '../rules/pairs.js'
import type { ExplanationPart } from './explanation.js'
import { markText } from './rule-text.js'
import type { WhySign } from './why-walk.js'
import {
  airText,
  hertz,
  kv2,
  length,
  openText,
  outcomeText,
  percent,
  placeText,
  severityFigure,
  verdictText,
} from './words.js'

const mm = (metres: number): string => `${(metres * 1000).toFixed(2)} mm`

const ground = { low: -1, high: -1, t: 0 }

interface Air {
  readonly gap: Gap
  readonly start: GapStart
  /** V peak between the conductors that the verdict went by */
  readonly peak: number
}

function airOf({ inspection }: WhySign, pair: PairFinding): Air {
  const gap = gapBetween(inspection.context, pair.gap, pair.a, pair.b)
  const start = gapStart(gap)
  return { gap, start, peak: pair.air.peak / start.share }
}

/** What a tube that is open does to this pair: each side, the difference, and what the air does then. */
export function openPart(sign: WhySign, pair: PairFinding): ExplanationPart {
  const { difference, air, judgedOn } = pair
  const { open } = air
  const counts =
    judgedOn === 'broken'
      ? 'It is the condition asked for.'
      : open?.counted
        ? 'It counts: there is no open-circuit protection.'
        : 'A note only: the supply shuts down on an open circuit.'
  return {
    title: 'With a tube open',
    lines: [
      'With a tube open no current flows and nothing drops: each side of the break stands at the no-load voltage of its terminal.',
      ...[pair.a, pair.b].flatMap((spot) => openSideLine(sign, spot)),
      difference.broken > 0
        ? `Between the two, at the worst: ${kv2(difference.broken)} rms, with ${openText(pair)}.`
        : 'No tube open puts a voltage between the two.',
      ...(open
        ? [
            `That is ${kv2(open.peak)} peak across the air of ${kv2(air.startsAt)}: ${outcomeText[open.outcome]}. ${counts}`,
          ]
        : []),
    ],
  }
}

/** The most that a place stands at to ground, and with which tube open. */
function openSideLine({ layout, inspection }: WhySign, spot: Spot): string[] {
  const { broken } = inspection.context
  const mix = nodeMix(inspection.probe, spot.body, spot.at)
  const volts = brokenPotential(broken, mix)
  if (spot.kind === 'metal' || spot.kind === 'face') return []
  const open = openTubes(broken, mix, ground)
  const which = open.length > 0 ? `, with ${open.join(' and ')} open` : ''
  return [`${placeText(spot, layout.units, 'long')}: up to ${kv2(volts)} rms to ground${which}.`]
}

/** How the peak divides between glass and air. */
export function airPart(sign: WhySign, pair: PairFinding): ExplanationPart {
  const { gap, start, peak } = airOf(sign, pair)
  const { wallsAsAir } = airShare(gap.gap, gap.a, gap.b)
  const walls = [wallText(pair.a.part, gap.a), wallText(pair.b.part, gap.b)].filter((t) => t !== '')
  const thick = mm(start.airGap)
  return {
    title: 'Across glass and air',
    lines: [
      `Peak between the two: ${kv2(peak)} (${peakOrigin(pair, peak)}).`,
      walls.length === 0
        ? 'Bare on both sides: the air has all of it.'
        : `${walls.join(' and ')}: in series with the air, worth ${mm(wallsAsAir)} of it.`,
      ...(start.airGap > gap.gap * (1 + 1e-9)
        ? [`The parts nearly touch: the wedge of air beside the nearest place, ${mm(start.airGap)}, counts.`]
        : []),
      ...(walls.length === 0
        ? []
        : [
            `The air has ${thick} of ${thick} + ${mm(wallsAsAir)}, ${percent(start.share)}: ${kv2(pair.air.peak)} peak across the air.`,
          ]),
    ],
  }
}

function wallText(part: string, { kind, wall, permittivity }: Surface): string {
  if (wall <= 0) return ''
  return `${mm(wall)} of ${kind === 'glass' ? 'glass' : 'insulation'} on ${part} (permittivity ${permittivity})`
}

function peakOrigin({ difference, judgedOn }: PairFinding, peak: number): string {
  const is = (volts: number | undefined) => volts !== undefined && Math.abs(volts - peak) <= 1e-6 * peak
  if (judgedOn === 'lit' && is(difference.litPeak)) return 'upper end of the lit band'
  if (judgedOn === 'broken') return 'with a tube open'
  return judgedOn === 'lit'
    ? 'no-load peak: a core-and-coil supply relights at it every half-cycle'
    : 'of the nameplate difference'
}

/** What it takes for a discharge to start in this gap. */
export function startPart(sign: WhySign, pair: PairFinding): ExplanationPart {
  const { gap, start } = airOf(sign, pair)
  const { density } = airDensity(gap.altitude)
  const pressure = effectivePressureBar(density)
  const { line: facing } = airShare(gap.gap, gap.a, gap.b)
  const line = start.airGap > facing.gap ? facingLine(facing.sharp, facing.blunt, start.airGap) : facing
  const [breakdown, streamer] = [uniformBreakdown(line.gap, pressure), streamerStart(line, pressure)]
  const factor = frequencyFactor(gap.frequency, start.airGap, gap.mode)
  const before = start.startsAt / factor
  const lower = Math.min(breakdown, streamer)
  const { air } = pair
  return {
    title: 'What starts a discharge there',
    lines: [
      `The field is uneven: on the average ${percent(line.utilisation)} of its greatest value.`,
      `Breakdown of so much air takes ${kv2(breakdown)} peak, a streamer from the strongest field ${kv2(streamer)}; the lower counts.`,
      ...(before < lower * (1 - 1e-6) ? [`The bare edge glows before that: ${kv2(before)} peak.`] : []),
      ...(gap.altitude > 0
        ? [`At ${gap.altitude} m the air has ${percent(density)} of its density; counted in.`]
        : []),
      `Times ${factor.toFixed(2)} at ${hertz(gap.frequency)} (the ${airText[gap.mode]}): a discharge starts at ${kv2(air.startsAt)} peak across the air.`,
      `${kv2(air.peak)} of ${kv2(air.startsAt)} is ${severityFigure(air.peak / air.startsAt)} x: ${outcomeText[air.outcome]}.`,
    ],
  }
}

/** What each rule asks for and whether it is met. */
export function rulesPart(sign: WhySign, pair: PairFinding): ExplanationPart {
  return {
    title: 'What the rule sets need',
    lines:
      pair.rules.length === 0
        ? ['None of the chosen rule sets has a rule for such a pair.']
        : pair.rules.map((rule) => ruleLine(sign, pair, rule)),
  }
}

function ruleLine({ layout: { units } }: WhySign, { gap }: PairFinding, rule: RuleFinding): string {
  const basis = rule.severity === undefined ? 'whatever the voltage' : `by the ${rule.condition} voltage`
  const times =
    rule.severity === undefined ? '' : `, ${severityFigure(rule.severity)} x what this gap may have`
  const met = rule.ok ? 'met' : 'NOT met'
  const advice = rule.advice === '' ? '' : ` ${rule.advice[0]!.toUpperCase()}${rule.advice.slice(1)}.`
  return `${rule.set}, ${rule.clause} (${markText[rule.mark]}), ${basis}: needs ${length(rule.needs, units)}, has ${length(gap, units)}${times}: ${met}.${advice.replace('..', '.')}`
}

export function verdictPart({ inspection }: WhySign, pair: PairFinding): ExplanationPart {
  const { verdict, severity, governs, unsure } = pair
  return {
    title: 'Verdict',
    lines: [
      `${verdict === 'within' ? verdictText(verdict, inspection.context.ruleSets) : verdict.toUpperCase()}, ${severityFigure(severity)} x its limit; what governs: ${governs}.`,
      ...(unsure ? ['At the lower end of the band the verdict would be another: it is not sure.'] : []),
    ],
  }
}
