/**
 * What the gap of a run allows, so that a wiring can be judged without looking at the geometry again. V rms, m.
 *
 * The rules and the start of a discharge are asked once at each sample, with the greatest difference that the lit sign
 * has; what they answer is taken as proportional to the difference. Of the samples only those are kept that are the
 * worst for some offset between the two parts.
 */
import { type GapStart, gapStart, stressFrom } from '../gaps/gap-stress.js'
import type { Body } from '../geometry/conductors.js'
import type { BodyRef, CloseRun } from '../geometry/runs.js'
import type { Supply } from '../layout/layout.js'
import { noLoadVoltage } from '../network/supplies.js'
import { type ChosenRule, type PlaceVoltage, ruleFindings, severityCap } from '../rules/pair-rules.js'
import { bodyOf, circuitsOf, type Parts, surface } from '../rules/passing.js'
import { unstrained } from './score.js'

/**
 * One run between two parts. Severity = max(steady, max over k of per[k] · |Va − Vb + at[k]|); between two supplies
 * per[k] · √((Va + at[k])² + (Vb + atB[k])²).
 */
export interface Limit {
  /** potential at the sample on a less that on b, against the entering end (tubes) or the whole part (leads), V */
  readonly at: Float64Array
  /** severity per volt */
  readonly per: Float64Array
  /** what no wiring changes: an open tube */
  readonly steady: number
  /** a fixed distance is broken: to fix whatever the voltage */
  readonly broken: boolean
  /** the parts belong to two supplies: `at` is of a alone, this of b */
  readonly atB?: Float64Array
}

/** What is known of each circuit before any wiring is judged. */
export interface CircuitFigures {
  readonly supply: Supply
  /** V rms that the lit string takes, at the upper end of its band */
  readonly needed: number
}

export interface LimitContext {
  readonly parts: Parts
  readonly rules: readonly ChosenRule[]
  readonly altitude: number
  readonly circuits: readonly CircuitFigures[]
}

/** Severity per volt at each sample of a run, and what does not depend on the wiring. */
export interface RunLimit {
  readonly run: CloseRun
  readonly per: Float64Array
  readonly steady: number
  readonly broken: boolean
  readonly apart: boolean
}

export function runLimit(context: LimitContext, run: CloseRun): RunLimit {
  const { parts, circuits } = context
  const involved = circuitsOf(parts, run).map((c) => circuits[c]!)
  const alone = involved.length < 2
  const touchesGround = [run.a, run.b].some((ref) => outsideCircuits(parts, ref))
  const sum = (figure: (c: CircuitFigures) => number) => involved.reduce((total, c) => total + figure(c), 0)
  const lit = Math.max(
    1,
    sum((c) => c.needed),
  )
  const nameplate = sum((c) => noLoadVoltage(c.supply))
  const open = sum((c) => openVoltage(c.supply, touchesGround || !alone))
  const counted = !involved.every(({ supply }) => supply.openCircuitProtection)
  const relights = parts.supplies.some((s) => s.type === 'core-and-coil')
  const peak = Math.SQRT2 * (relights ? Math.max(lit, nameplate) : lit)
  const per = new Float64Array(run.gap.length)
  const voltages = { lit: all(lit), nameplate: all(nameplate), broken: all(open) }
  let steady = 0
  let broken = false
  for (let i = 0; i < per.length; i++) {
    const start = startAt(context, run, i)
    // between two supplies the peaks add, the rms values do not
    let worst = stressFrom(start, peak).margin * (alone ? 1 : Math.SQRT2)
    if (counted) steady = Math.max(steady, stressFrom(start, Math.SQRT2 * open).margin)
    for (const found of ruleFindings(context.rules, parts, run, i, voltages)) {
      if (found.severity === undefined) broken ||= !found.ok
      else if (found.condition === 'broken') steady = Math.max(steady, found.severity)
      // at the cap there is no room at all: any difference is too much
      else if (found.severity >= severityCap) steady = severityCap
      else worst = Math.max(worst, found.severity)
    }
    per[i] = worst / lit
  }
  return { run, per, steady, broken, apart: !alone }
}

const all = (rms: number): PlaceVoltage => {
  const both = { rms, peak: Math.SQRT2 * rms }
  return { ...both, toGround: () => both }
}

/** With a tube open: between two places of one string all of the no-load voltage, to ground what a terminal has. */
const openVoltage = (supply: Supply, toGround: boolean): number =>
  noLoadVoltage(supply) * (toGround && supply.grounding === 'midpoint' ? 0.5 : 1)

const outsideCircuits = (parts: Parts, ref: BodyRef): boolean => {
  const kind: Body['kind'] | undefined = bodyOf(parts, ref)?.kind
  return kind !== 'tube' && kind !== 'lead'
}

function startAt({ parts, altitude }: LimitContext, run: CloseRun, i: number): GapStart {
  return gapStart({
    gap: run.gap[i]!,
    a: surface(parts, run.a, run.atA[i]!),
    b: surface(parts, run.b, run.atB[i]!),
    frequency: Math.max(...parts.supplies.map((s) => s.frequency)),
    altitude,
    mode: 'cautious',
  })
}

/** offsets between two parts that samples are tried with */
const tried = 64

/**
 * The limit of a run with the potentials of its samples filled in; `most` V bounds the potentials of the two parts.
 * Only the samples that are worst for some offset are kept; nothing at all of a run that cannot strain.
 */
export function limitOf(
  { per, steady, broken, apart }: RunLimit,
  atA: Float64Array,
  atB: Float64Array,
  most: number,
): readonly Limit[] {
  if (!broken && steady < unstrained && per.every((c) => c * 2 * most < unstrained)) return []
  const whole: Limit = apart
    ? { at: atA, atB, per, steady, broken }
    : { at: atA.map((v, k) => v - atB[k]!), per, steady, broken }
  const kept = new Set<number>()
  for (let k = 0; k <= tried; k++) {
    const x = most * ((2 * k) / tried - 1)
    // in two circuits the two potentials go their own ways
    for (let m = 0; m <= (apart ? 8 : 0); m++) kept.add(worstSample(whole, x, apart ? most * (m / 4 - 1) : 0))
  }
  const only = (of: Float64Array) =>
    Float64Array.from(
      [...kept].sort((p, q) => p - q),
      (i) => of[i]!,
    )
  return [{ ...whole, at: only(whole.at), per: only(per), ...(whole.atB && { atB: only(whole.atB) }) }]
}

function worstSample(limit: Limit, va: number, vb: number): number {
  let worst = 0
  let most = -1
  for (let k = 0; k < limit.per.length; k++) {
    const here = sampleSeverity(limit, k, va, vb)
    if (here > most) {
      most = here
      worst = k
    }
  }
  return worst
}

function sampleSeverity({ at, atB, per }: Limit, k: number, va: number, vb: number): number {
  if (atB === undefined) return per[k]! * Math.abs(va - vb + at[k]!)
  const a = va + at[k]!
  const b = vb + atB[k]!
  return per[k]! * Math.sqrt(a * a + b * b)
}

/** Severity of the run with the parts at these potentials, V. */
export function severityAt(limit: Limit, va: number, vb: number): number {
  const { per, steady } = limit
  let most = steady
  for (let k = 0; k < per.length; k++) {
    const here = sampleSeverity(limit, k, va, vb)
    if (here > most) most = here
  }
  return most
}

/** The same run seen from the other part. */
export const swappedLimit = (limit: Limit): Limit =>
  limit.atB ? { ...limit, at: limit.atB, atB: limit.at } : { ...limit, at: limit.at.map((v) => -v) }
