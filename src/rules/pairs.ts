/** Verdicts on every place where two conductors pass each other. V rms unless said; m. */

import { type GapStart, gapStart, type Surface, stressFrom } from '../gaps/gap-stress.js'
import type { Body, FixedBody, LeadBody } from '../geometry/conductors.js'
import type { BodyRef, CloseRun } from '../geometry/runs.js'
import type { Layout, Point, Supply } from '../layout/layout.js'
import { type NodeMix, nodeMix, type Probe, peakDifference, rmsDifference } from '../network/potentials.js'
import type { PotentialField } from '../network/solution.js'
import { commonPractice } from './common-practice.js'
import type { Differences, PairFinding, PartKind, RuleFinding, Spot, Verdict } from './findings.js'

/** The lit fields of the nominal gradient and of the two ends of the band, of the circuits that are lit. */
export interface LitFields {
  readonly nominal: readonly PotentialField[]
  readonly band: readonly (readonly PotentialField[])[]
  /** where the upper end of the band does not burn: nominal times this (no-load over needed) stands for it */
  readonly ceiling?: number
}

export interface PairContext {
  readonly layout: Layout
  readonly bodies: readonly FixedBody[]
  readonly leads: readonly LeadBody[]
  /** circuit of each lead and of each tube (−1: none), and the leads that are feeds */
  readonly circuitOfLead: readonly number[]
  readonly circuitOfTube: readonly number[]
  readonly feeds: ReadonlySet<number>
  /** the supply of each circuit */
  readonly supplies: readonly Supply[]
  readonly probe: Probe
  readonly nameplate: readonly PotentialField[]
  readonly lit?: LitFields
  /** what verdicts go by; differences of both are told */
  readonly condition: 'lit' | 'nameplate'
  readonly unlit: ReadonlySet<number>
}

/** part of a tube next to its electrode that counts as bare where there is no boot, m (ours) */
const electrodeReach = 0.01
/** rounding allowance of the gap when samples are compared: about the air that the walls stand for, m (ours) */
const wallAllowance = 0.002
const cap = 999

export function pairFindings(context: PairContext, runs: readonly CloseRun[]): PairFinding[] {
  const seen = new Map<string, number>()
  const findings = runs.map((run) => {
    const names = `${partName(context, run.a)}|${partName(context, run.b)}`
    const count = seen.get(names) ?? 0
    seen.set(names, count + 1)
    return pairFinding(context, run, `${names}|${count}`)
  })
  return findings.sort(worstFirst)
}

const rank: Record<Verdict, number> = { fix: 0, watch: 1, within: 2 }
export const worstFirst = (a: PairFinding, b: PairFinding): number =>
  rank[a.verdict] - rank[b.verdict] || b.severity - a.severity || a.gap - b.gap || (a.key < b.key ? -1 : 1)

/** The finding at the worst sample of one run. */
function pairFinding(context: PairContext, run: CloseRun, key: string): PairFinding {
  const lit = litFor(context, run)
  let worst = 0
  let most = -1
  for (let i = 0; i < run.gap.length; i++) {
    const [a, b] = mixes(context, run, i)
    const weight = judgedDifference(context, lit, a, b) / (run.gap[i]! + wallAllowance)
    if (weight > most * (1 + 1e-9)) {
      most = weight
      worst = i
    }
  }
  return findingAt(context, run, worst, lit, key)
}

/** The finding for any two spots: what the probe of the inspector asks for. `run` has one sample. */
export const probeFinding = (context: PairContext, run: CloseRun): PairFinding =>
  pairFinding(context, run, 'probe')

function mixes({ probe }: PairContext, run: CloseRun, i: number): [NodeMix, NodeMix] {
  return [nodeMix(probe, run.a, run.atA[i]!), nodeMix(probe, run.b, run.atB[i]!)]
}

/** Lit fields, unless one of the two parts belongs to a circuit that is not lit. */
function litFor(context: PairContext, run: CloseRun): LitFields | undefined {
  const unlit = [run.a, run.b].some((body) => context.unlit.has(circuitOf(context, body)))
  return unlit ? undefined : context.lit
}

function circuitOf(context: PairContext, body: BodyRef): number {
  if (body.kind === 'lead') return context.circuitOfLead[body.index] ?? -1
  if (body.kind === 'fixed') return context.circuitOfTube[body.index] ?? -1
  return -1
}

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

function findingAt(
  context: PairContext,
  run: CloseRun,
  i: number,
  lit: LitFields | undefined,
  key: string,
): PairFinding {
  const [a, b] = mixes(context, run, i)
  const gap = run.gap[i]!
  const start = startOf(context, run, i)
  const noLoadPeak = peakDifference(context.nameplate, a, b)
  const relights = context.supplies.some((s) => s.type === 'core-and-coil')
  const judged = (rms: number, peak: number) => {
    const rules = ruleFindings(context, run, gap, rms)
    // on core-and-coil every half-cycle relights: the no-load peak counts as well
    const stress = stressFrom(start, relights ? Math.max(peak, noLoadPeak) : peak)
    return { rules, stress, verdict: judge(rules, stress.margin) }
  }
  const difference = differences(context, lit, a, b)
  const onLit = lit !== undefined && context.condition === 'lit'
  const { rules, stress, verdict } = onLit
    ? judged(upper(lit, rmsDifference, a, b), upper(lit, peakDifference, a, b))
    : judged(difference.nameplate, noLoadPeak)
  const atLow = onLit
    ? judged(lower(lit, rmsDifference, a, b), lower(lit, peakDifference, a, b)).verdict
    : verdict
  return {
    key,
    kind: pairKind(context, run),
    a: spot(context, run.a, run.atA[i]!, run.pointA, i),
    b: spot(context, run.b, run.atB[i]!, run.pointB, i),
    gap,
    difference,
    air: { peak: stress.airPeak, startsAt: stress.startsAt, outcome: stress.outcome },
    rules,
    ...verdict,
    judgedOn: onLit ? 'lit' : 'nameplate',
    unsure: (atLow.verdict === 'fix') !== (verdict.verdict === 'fix'),
  }
}

function differences(context: PairContext, lit: LitFields | undefined, a: NodeMix, b: NodeMix): Differences {
  const nameplate = rmsDifference(context.nameplate, a, b)
  if (!lit) return { nameplate }
  return {
    lit: rmsDifference(lit.nominal, a, b),
    litLow: lower(lit, rmsDifference, a, b),
    litHigh: upper(lit, rmsDifference, a, b),
    litPeak: upper(lit, peakDifference, a, b),
    nameplate,
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

function body(context: PairContext, ref: BodyRef): Body | undefined {
  if (ref.kind === 'fixed') return context.bodies[ref.index]
  return ref.kind === 'lead' ? context.leads[ref.index] : undefined
}

function surface(context: PairContext, ref: BodyRef, at: number): Surface {
  const part = body(context, ref)
  if (!part) return { kind: 'plane', outerRadius: 0, wall: 0, permittivity: 1 }
  const { outerRadius, coreRadius, permittivity } = part
  const wall = outerRadius - coreRadius
  const bare: Surface = { kind: 'bare', outerRadius, wall: 0, permittivity: 1 }
  if (part.kind === 'bar') return bare
  if (part.kind === 'lead') return { kind: 'insulated', outerRadius, wall, permittivity }
  const atElectrode = at < electrodeReach || at > part.line.length - electrodeReach
  return atElectrode && !part.boots ? bare : { kind: 'glass', outerRadius, wall, permittivity }
}

/** What the chosen rule sets say of a gap at a difference (V rms, the upper end of the lit band). */
function ruleFindings(context: PairContext, run: CloseRun, gap: number, difference: number): RuleFinding[] {
  const found: RuleFinding[] = []
  if (!context.layout.rules.includes(commonPractice.id)) return found
  const kinds = [partKind(context, run.a), partKind(context, run.b)]
  const { thumb, outputLeads } = commonPractice
  if (kinds.includes('tube') && !kinds.includes('lead')) {
    const allowed = (thumb.voltage * gap) / thumb.gap
    const severity =
      gap >= thumb.gap ? 0 : Math.min(cap, allowed > 0 ? difference / allowed : difference > 0 ? cap : 0)
    found.push({
      set: commonPractice.id,
      clause: thumb.clause,
      needs: Math.min(thumb.gap, (thumb.gap * difference) / thumb.voltage),
      ok: severity <= 1,
      severity,
      advice: thumb.advice,
    })
  }
  if (betweenOutputLeads(context, run))
    found.push({
      set: commonPractice.id,
      clause: outputLeads.clause,
      needs: outputLeads.gap,
      ok: gap >= outputLeads.gap,
      advice: outputLeads.advice,
    })
  return found
}

function betweenOutputLeads(context: PairContext, { a, b }: CloseRun): boolean {
  if (a.kind !== 'lead' || b.kind !== 'lead' || a.index === b.index) return false
  const circuit = context.circuitOfLead[a.index]
  if (circuit === undefined || circuit !== context.circuitOfLead[b.index]) return false
  const supply = context.supplies[circuit]
  return context.feeds.has(a.index) && context.feeds.has(b.index) && supply?.type === 'electronic'
}

/** Verdict, severity and which criterion governs: the worst verdict, then the worst severity. */
function judge(
  rules: readonly RuleFinding[],
  margin: number,
): { severity: number; verdict: Verdict; governs: string } {
  const criteria = [
    { governs: 'physics: discharge in the air', severity: Math.min(cap, margin), verdict: verdictOf(margin) },
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

function partKind(context: PairContext, ref: BodyRef): PartKind {
  const part = body(context, ref)
  return !part ? 'face' : part.kind === 'bar' ? 'metal' : part.kind
}
const partName = (context: PairContext, ref: BodyRef): string => body(context, ref)?.name ?? 'face'

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
