/** Verdicts on every place where two conductors pass each other. V rms unless said; m. */

import type { StartMode } from '../gaps/air.js'
import { type Gap, type GapStart, gapStart, stressFrom } from '../gaps/gap-stress.js'
import type { BodyRef, CloseRun } from '../geometry/runs.js'
import type { Layout, Point } from '../layout/layout.js'
import { type Broken, brokenDifference, isProtected } from '../network/broken.js'
import { type NodeMix, nodeMix, type Probe, rmsDifference } from '../network/potentials.js'
import type { PotentialField } from '../network/solution.js'
import type { Condition, PairFinding, PairKind, PairPart, RuleFinding, Spot, Verdict } from './findings.js'
import {
  type ChosenRule,
  chosenRules,
  type PlaceVoltage,
  type RuleVoltages,
  ruleFindings,
  severityCap,
} from './pair-rules.js'
import { circuitsOf, type Parts, partKind, partName, surface } from './passing.js'
import { otherPlaces } from './places.js'
import type { RuleSet } from './rule-set.js'
import { differences, type LitFields, litUpper, type Voltages, voltagesAt } from './voltages.js'

export interface PairContext extends Parts {
  readonly layout: Layout
  readonly ruleSets: readonly RuleSet[]
  readonly probe: Probe
  readonly nameplate: readonly PotentialField[]
  readonly broken: Broken
  readonly lit?: LitFields
  /** which reading of the evidence starts of discharges go by */
  readonly air: StartMode
  /** what verdicts go by; differences of all are told */
  readonly condition: Condition
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
  let narrowest = 0
  const weights = new Float64Array(run.gap.length)
  for (let i = 0; i < run.gap.length; i++) {
    weights[i] = weight(i)
    if (run.gap[i]! < run.gap[narrowest]!) narrowest = i
    if (weights[i]! > most * (1 + 1e-9)) {
      most = weights[i]!
      worst = i
    }
  }
  const kept = [findingAt(judge, run, worst, lit, key)]
  const others = otherPlaces(context, rules, run, weights, worst)
  // a tube open puts the same voltage on all of the run: where it is narrowest is worst then
  if (narrowest !== worst && !others.includes(narrowest) && openCounts(judge, run, narrowest))
    others.push(narrowest)
  for (const i of others) {
    const other = findingAt(judge, run, i, lit, `${key}|${kept.length}`)
    if (saysMore(other, kept)) kept.push(other)
  }
  return kept
}

/** Does a place deserve a verdict of its own for what an open tube does there? */
function openCounts({ context, rules }: Judge, run: CloseRun, i: number): boolean {
  if (rules.some(({ rule }) => rule.by.condition === 'broken')) return true
  const [a, b] = mixes(context, run, i)
  if (isProtected(context.broken, a, b)) return false
  const peak = Math.SQRT2 * brokenDifference(context.broken, a, b)
  return verdictOf(stressFrom(startOf(context, run, i), peak).margin) !== 'within'
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
  if (context.condition === 'broken') return brokenDifference(context.broken, a, b)
  return lit && context.condition === 'lit' ? litUpper(lit, a, b) : rmsDifference(context.nameplate, a, b)
}

function findingAt(
  { context, rules: chosen }: Judge,
  run: CloseRun,
  i: number,
  lit: LitFields | undefined,
  key: string,
): PairFinding {
  const places = mixes(context, run, i)
  const voltages = voltagesAt(context, lit, ...places)
  const { nameplate, broken } = voltages
  const judgedOn = basisOf(context.condition, voltages)
  const start = startOf(context, run, i)
  const relights = circuitsOf(context, run).some((c) => context.supplies[c]?.type === 'core-and-coil')
  const opened = stressFrom(start, broken.peak)
  // with open-circuit protection an open tube is a note, unless it is what is asked for
  const openCounted = judgedOn === 'broken' || !isProtected(context.broken, ...places)
  const judged = (place: PlaceVoltage) => {
    const rules = ruleFindings(chosen, context, run, i, ruleVoltages(judgedOn, place, voltages))
    // on core-and-coil every half-cycle relights: the no-load peak of its parts counts as well
    const peak = judgedOn === 'lit' && relights ? Math.max(place.peak, nameplate.peak) : place.peak
    const stress = stressFrom(start, peak)
    return { rules, stress, verdict: judge(rules, stress.margin, openCounted ? opened.margin : 0) }
  }
  const onLit = judgedOn === 'lit' ? voltages.lit : undefined
  const { rules, stress, verdict } = judged(onLit?.high ?? (judgedOn === 'broken' ? broken : nameplate))
  const atLow = onLit ? judged(onLit.low).verdict : verdict
  return {
    key,
    kind: pairKind(context, run),
    a: spot(context, run.a, run.atA[i]!, run.pointA, i),
    b: spot(context, run.b, run.atB[i]!, run.pointB, i),
    gap: run.gap[i]!,
    difference: differences(voltages),
    air: {
      peak: stress.airPeak,
      startsAt: stress.startsAt,
      outcome: stress.outcome,
      ...(broken.rms > 0 && {
        open: { peak: opened.airPeak, outcome: opened.outcome, counted: openCounted },
      }),
    },
    rules,
    ...verdict,
    judgedOn,
    unsure: (atLow.verdict === 'fix') !== (verdict.verdict === 'fix'),
  }
}

/** Lit where it is asked for and solved, else nameplate. */
const basisOf = (condition: Condition, { lit }: Voltages): Condition =>
  condition === 'lit' && !lit ? 'nameplate' : condition

function ruleVoltages(
  judgedOn: Condition,
  place: PlaceVoltage,
  { nameplate, broken }: Voltages,
): RuleVoltages {
  if (judgedOn === 'broken') return { nameplate, broken, all: 'broken' }
  return judgedOn === 'lit' ? { lit: place, nameplate, broken } : { nameplate, broken }
}

/** starts of discharge do not depend on the wiring: kept by the samples of the run they belong to */
const starts = new WeakMap<Float64Array, Map<string, GapStart>>()

function startOf(context: PairContext, run: CloseRun, i: number): GapStart {
  const known = starts.get(run.gap) ?? new Map<string, GapStart>()
  starts.set(run.gap, known)
  const name = `${i} ${highestFrequency(context)} ${context.layout.altitude} ${context.air}`
  const [a, b] = [
    { body: run.a, at: run.atA[i]! },
    { body: run.b, at: run.atB[i]! },
  ]
  const start = known.get(name) ?? gapStart(gapBetween(context, run.gap[i]!, a, b))
  known.set(name, start)
  return start
}

const highestFrequency = ({ supplies }: PairContext): number => Math.max(...supplies.map((s) => s.frequency))

/** The surfaces and the air between two places, as verdicts take them: the sign's highest frequency. */
export const gapBetween = (
  context: PairContext,
  gap: number,
  a: Pick<Spot, 'body' | 'at'>,
  b: Pick<Spot, 'body' | 'at'>,
): Gap => ({
  gap,
  a: surface(context, a.body, a.at),
  b: surface(context, b.body, b.at),
  frequency: highestFrequency(context),
  altitude: context.layout.altitude,
  mode: context.air,
})

/** the criterion of physics with a tube open, as verdicts name it */
export const openTubePhysics = 'physics: discharge in the air, a tube open'

/** Verdict, severity and which criterion governs: the worst verdict, then the worst severity. */
function judge(
  rules: readonly RuleFinding[],
  margin: number,
  openMargin: number,
): { severity: number; verdict: Verdict; governs: string } {
  const physics = (governs: string, by: number) => ({
    governs,
    severity: Math.min(severityCap, by),
    verdict: verdictOf(by),
  })
  const criteria = [
    physics('physics: discharge in the air', margin),
    physics(openTubePhysics, openMargin),
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

const pairOrder: Record<PairPart, number> = { tube: 0, lead: 1, metal: 2 }

function pairKind(context: PairContext, { a, b }: CloseRun): PairKind {
  const word = (ref: BodyRef): PairPart => {
    const kind = partKind(context, ref)
    return kind === 'face' ? 'metal' : kind
  }
  const [one, two] = [word(a), word(b)]
  return pairOrder[one] <= pairOrder[two] ? `${one}-${two}` : `${two}-${one}`
}

function spot(context: PairContext, ref: BodyRef, at: number, points: Float64Array, i: number): Spot {
  const point: Point = [points[3 * i]!, points[3 * i + 1]!, points[3 * i + 2]!]
  return { body: ref, kind: partKind(context, ref), part: partName(context, ref), at, point }
}
