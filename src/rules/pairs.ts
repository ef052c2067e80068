/** Verdicts on every place where two conductors pass each other. V rms unless said; m. */

import { type GapStart, gapStart, stressFrom } from '../gaps/gap-stress.js'
import type { BodyRef, CloseRun } from '../geometry/runs.js'
import type { Layout, Point } from '../layout/layout.js'
import { type NodeMix, nodeMix, type Probe, peakDifference, rmsDifference } from '../network/potentials.js'
import type { PotentialField } from '../network/solution.js'
import type { Differences, PairFinding, PartKind, RuleFinding, Spot, Verdict } from './findings.js'
import { type ChosenRule, chosenRules, type PlaceVoltage, ruleFindings, severityCap } from './pair-rules.js'
import { circuitsOf, type Parts, partKind, partName, surface } from './passing.js'
import { otherPlaces } from './places.js'
import type { RuleSet } from './rule-set.js'

/** The lit fields of the nominal gradient and of the two ends of the band, of the circuits that are lit. */
export interface LitFields {
  readonly nominal: readonly PotentialField[]
  readonly band: readonly (readonly PotentialField[])[]
  /** where the upper end of the band does not burn: nominal times this (no-load over needed) stands for it */
  readonly ceiling?: number
}

export interface PairContext extends Parts {
  readonly layout: Layout
  readonly ruleSets: readonly RuleSet[]
  readonly probe: Probe
  readonly nameplate: readonly PotentialField[]
  readonly lit?: LitFields
  /** what verdicts go by; differences of both are told */
  readonly condition: 'lit' | 'nameplate'
  readonly unlit: ReadonlySet<number>
}

/** rounding allowance of the gap when samples are compared: about the air that the walls stand for, m (ours) */
const wallAllowance = 0.002

/** What every pair of one sign is judged with. */
interface Judge {
  readonly context: PairContext
  readonly rules: readonly ChosenRule[]
}
const judgeOf = (context: PairContext): Judge => ({
  context,
  rules: chosenRules(context.ruleSets, context.layout.altitude),
})

export function pairFindings(context: PairContext, runs: readonly CloseRun[]): PairFinding[] {
  const judge = judgeOf(context)
  const seen = new Map<string, number>()
  const findings = runs.flatMap((run) => {
    const names = `${partName(context, run.a)}|${partName(context, run.b)}`
    const count = seen.get(names) ?? 0
    seen.set(names, count + 1)
    return runFindings(judge, run, `${names}|${count}`)
  })
  return findings.sort(worstFirst)
}

const rank: Record<Verdict, number> = { fix: 0, watch: 1, within: 2 }
export const worstFirst = (a: PairFinding, b: PairFinding): number =>
  rank[a.verdict] - rank[b.verdict] || b.severity - a.severity || a.gap - b.gap || (a.key < b.key ? -1 : 1)

/**
 * The finding at the place of a run with the most voltage for its gap; and at other places where a rule is broken
 * that is met there: a fixed distance at the narrowest place, or what holds at electrodes only.
 */
function runFindings(judge: Judge, run: CloseRun, key: string): PairFinding[] {
  const { context, rules } = judge
  const lit = litFor(context, run)
  const weight = (i: number): number => {
    const [a, b] = mixes(context, run, i)
    return judgedDifference(context, lit, a, b) / (run.gap[i]! + wallAllowance)
  }
  let worst = 0
  let most = -1
  const weights = new Float64Array(run.gap.length)
  for (let i = 0; i < run.gap.length; i++) {
    weights[i] = weight(i)
    if (weights[i]! > most * (1 + 1e-9)) {
      most = weights[i]!
      worst = i
    }
  }
  const kept = [findingAt(judge, run, worst, lit, key)]
  for (const i of otherPlaces(context, rules, run, weights, worst)) {
    const other = findingAt(judge, run, i, lit, `${key}|${kept.length}`)
    if (saysMore(other, kept)) kept.push(other)
  }
  return kept
}

/** A worse verdict than all before, or a rule broken that is not broken at the places before. */
function saysMore(other: PairFinding, before: readonly PairFinding[]): boolean {
  const broken = (finding: PairFinding, { set, clause }: RuleFinding) =>
    finding.rules.some((r) => !r.ok && r.set === set && r.clause === clause)
  return (
    before.every((finding) => rank[other.verdict] < rank[finding.verdict]) ||
    other.rules.some((rule) => !rule.ok && !before.some((finding) => broken(finding, rule)))
  )
}

/** The finding for any two spots: what the probe of the inspector asks for. `run` has one sample. */
export const probeFinding = (context: PairContext, run: CloseRun): PairFinding =>
  findingAt(judgeOf(context), run, 0, litFor(context, run), 'probe')

function mixes({ probe }: PairContext, run: CloseRun, i: number): [NodeMix, NodeMix] {
  return [nodeMix(probe, run.a, run.atA[i]!), nodeMix(probe, run.b, run.atB[i]!)]
}

/** Lit fields, unless one of the two parts belongs to a circuit that is not lit. */
const litFor = (context: PairContext, run: CloseRun): LitFields | undefined =>
  circuitsOf(context, run).some((circuit) => context.unlit.has(circuit)) ? undefined : context.lit

function judgedDifference(context: PairContext, lit: LitFields | undefined, a: NodeMix, b: NodeMix): number {
  return lit && context.condition === 'lit'
    ? upper(lit, rmsDifference, a, b)
    : rmsDifference(context.nameplate, a, b)
}

type Measure = (fields: readonly PotentialField[], a: NodeMix, b: NodeMix) => number
const upper = (lit: LitFields, measure: Measure, a: NodeMix, b: NodeMix): number =>
  Math.max(
    measure(lit.nominal, a, b) * Math.max(1, lit.ceiling ?? 1),
    ...lit.band.map((fields) => measure(fields, a, b)),
  )
const lower = (lit: LitFields, measure: Measure, a: NodeMix, b: NodeMix): number =>
  Math.min(measure(lit.nominal, a, b), ...lit.band.map((fields) => measure(fields, a, b)))

const ground: NodeMix = { low: -1, high: -1, t: 0 }

/** Differences and potentials of one field set, or of one end of the lit band. */
function placeVoltage(
  measure: (take: Measure, a: NodeMix, b: NodeMix) => number,
  a: NodeMix,
  b: NodeMix,
): PlaceVoltage {
  const higher = (take: Measure) => Math.max(measure(take, a, ground), measure(take, b, ground))
  return {
    rms: measure(rmsDifference, a, b),
    peak: measure(peakDifference, a, b),
    toGround: () => ({ rms: higher(rmsDifference), peak: higher(peakDifference) }),
  }
}

/** The voltages at a place: on paper, and of the upper and lower end of the lit band. */
interface Voltages {
  readonly nameplate: PlaceVoltage
  readonly lit?: { readonly nominal: number; readonly low: PlaceVoltage; readonly high: PlaceVoltage }
}

function voltagesAt(
  { nameplate }: PairContext,
  lit: LitFields | undefined,
  a: NodeMix,
  b: NodeMix,
): Voltages {
  const onPaper = placeVoltage((take, p, q) => take(nameplate, p, q), a, b)
  if (!lit) return { nameplate: onPaper }
  return {
    nameplate: onPaper,
    lit: {
      nominal: rmsDifference(lit.nominal, a, b),
      low: placeVoltage((take, p, q) => lower(lit, take, p, q), a, b),
      high: placeVoltage((take, p, q) => upper(lit, take, p, q), a, b),
    },
  }
}

const differences = ({ nameplate, lit }: Voltages): Differences => ({
  ...(lit && { lit: lit.nominal, litLow: lit.low.rms, litHigh: lit.high.rms, litPeak: lit.high.peak }),
  nameplate: nameplate.rms,
})

function findingAt(
  { context, rules: chosen }: Judge,
  run: CloseRun,
  i: number,
  lit: LitFields | undefined,
  key: string,
): PairFinding {
  const voltages = voltagesAt(context, lit, ...mixes(context, run, i))
  const { nameplate } = voltages
  const start = startOf(context, run, i)
  const relights = context.supplies.some((s) => s.type === 'core-and-coil')
  const judged = (place: PlaceVoltage | undefined) => {
    const rules = ruleFindings(chosen, context, run, i, place ? { lit: place, nameplate } : { nameplate })
    // on core-and-coil every half-cycle relights: the no-load peak counts as well
    const peak = place ? Math.max(place.peak, relights ? nameplate.peak : 0) : nameplate.peak
    const stress = stressFrom(start, peak)
    return { rules, stress, verdict: judge(rules, stress.margin) }
  }
  const onLit = context.condition === 'lit' ? voltages.lit : undefined
  const { rules, stress, verdict } = judged(onLit?.high)
  const atLow = onLit ? judged(onLit.low).verdict : verdict
  return {
    key,
    kind: pairKind(context, run),
    a: spot(context, run.a, run.atA[i]!, run.pointA, i),
    b: spot(context, run.b, run.atB[i]!, run.pointB, i),
    gap: run.gap[i]!,
    difference: differences(voltages),
    air: { peak: stress.airPeak, startsAt: stress.startsAt, outcome: stress.outcome },
    rules,
    ...verdict,
    judgedOn: onLit ? 'lit' : 'nameplate',
    unsure: (atLow.verdict === 'fix') !== (verdict.verdict === 'fix'),
  }
}

/** starts of discharge do not depend on the wiring: kept by the samples of the run they belong to */
const starts = new WeakMap<Float64Array, Map<string, GapStart>>()

function startOf(context: PairContext, run: CloseRun, i: number): GapStart {
  const { altitude } = context.layout
  const frequency = Math.max(...context.supplies.map((s) => s.frequency))
  const known = starts.get(run.gap) ?? new Map<string, GapStart>()
  starts.set(run.gap, known)
  const name = `${i} ${frequency} ${altitude}`
  const start =
    known.get(name) ??
    gapStart({
      gap: run.gap[i]!,
      a: surface(context, run.a, run.atA[i]!),
      b: surface(context, run.b, run.atB[i]!),
      frequency,
      altitude,
      mode: 'cautious',
    })
  known.set(name, start)
  return start
}

/** Verdict, severity and which criterion governs: the worst verdict, then the worst severity. */
function judge(
  rules: readonly RuleFinding[],
  margin: number,
): { severity: number; verdict: Verdict; governs: string } {
  const criteria = [
    {
      governs: 'physics: discharge in the air',
      severity: Math.min(severityCap, margin),
      verdict: verdictOf(margin),
    },
    ...rules.map((r) => ({
      governs: `${r.set}: ${r.clause}`,
      severity: r.severity ?? 0,
      verdict: r.ok ? verdictOf(r.severity ?? 0) : ('fix' as const),
    })),
  ]
  const governing = criteria.reduce((w, c) =>
    rank[c.verdict] < rank[w.verdict] || (c.verdict === w.verdict && c.severity > w.severity) ? c : w,
  )
  return { ...governing, severity: Math.max(...criteria.map((c) => c.severity)) }
}

/** `fix` above 1, `watch` above 0.8. */
export const verdictOf = (severity: number): Verdict =>
  severity > 1 ? 'fix' : severity > 0.8 ? 'watch' : 'within'

function pairKind(context: PairContext, { a, b }: CloseRun): string {
  const order: PartKind[] = ['tube', 'lead', 'metal', 'face']
  const kinds = [partKind(context, a), partKind(context, b)].sort(
    (x, y) => order.indexOf(x) - order.indexOf(y),
  )
  return kinds.map((k) => (k === 'face' ? 'metal' : k)).join('-')
}

function spot(context: PairContext, ref: BodyRef, at: number, points: Float64Array, i: number): Spot {
  const point: Point = [points[3 * i]!, points[3 * i + 1]!, points[3 * i + 2]!]
  return { body: ref, kind: partKind(context, ref), part: partName(context, ref), at, point }
}
