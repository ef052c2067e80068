/** What the chosen rule sets say of a place where two parts pass each other. V, m. */
import type { CloseRun } from '../geometry/runs.js'
import type { Supply } from '../layout/layout.js'
import { noLoadVoltage } from '../network/supplies.js'
import { altitudeFactor, distanceAt, sameDistance, voltageAt } from './distance-table.js'
import type { Condition, RuleFinding } from './findings.js'
import { bitsAt, bodyBits, bodyOf, circuitsOf, type Parts } from './passing.js'
import type { Conditions, PairRule, Range, RuleSet, VoltageBasis } from './rule-set.js'

export const severityCap = 999

/** A rule of a chosen set, with its factor at the sign's altitude. */
export interface ChosenRule {
  readonly set: string
  readonly rule: PairRule
  readonly factor: number
}

/** The pair rules of all chosen sets, in their order. */
export const chosenRules = (sets: readonly RuleSet[], altitude: number): ChosenRule[] =>
  sets.flatMap((set) =>
    set.rules.flatMap((rule) =>
      rule.kind === 'pair' ? [{ set: set.id, rule, factor: altitudeFactor(rule.altitude, altitude) }] : [],
    ),
  )

/** Difference and higher potential to ground at a place, V rms and V peak. */
export interface PlaceVoltage {
  readonly rms: number
  readonly peak: number
  readonly toGround: () => { readonly rms: number; readonly peak: number }
}
/** The voltages that rules can go by; without a lit solution those by the lit sign go by the nameplate. */
export interface RuleVoltages {
  readonly lit?: PlaceVoltage
  readonly nameplate: PlaceVoltage
  readonly broken: PlaceVoltage
  /** every rule goes by this, whatever it asks for */
  readonly all?: 'broken'
}

/** Of the rules of a pair that are not met the one that asks for the widest gap. */
export const widestUnmet = ({ rules }: { readonly rules: readonly RuleFinding[] }): RuleFinding | undefined =>
  rules
    .filter((rule) => !rule.ok)
    .reduce<RuleFinding | undefined>(
      (widest, rule) => (widest && widest.needs >= rule.needs ? widest : rule),
      undefined,
    )

const matches = ({ sides: [one, two] }: PairRule, a: number, b: number): boolean =>
  ((a & one) !== 0 && (b & two) !== 0) || ((a & two) !== 0 && (b & one) !== 0)

/** room for the wall between a lead and the conduit that a distance counts from, m */
const conduitRoom = 0.02

/**
 * The greatest distance that a rule can ask for between parts with these bits whatever the difference there; 0 where
 * all go by it. Conditions are not looked at.
 */
export const widestFixed = (rules: readonly ChosenRule[], a: number, b: number): number =>
  rules.reduce((most, { rule, factor }) => {
    const { distance, by, fromConduit } = rule
    const fixed =
      typeof distance === 'number'
        ? distance
        : distance.interpolation === 'step' || by.of === 'no-load'
          ? distance.distances.at(-1)!
          : 0
    return fixed > 0 && matches(rule, a, b)
      ? Math.max(most, fixed * factor + (fromConduit ? conduitRoom : 0))
      : most
  }, 0)

/** The verdict of every rule that applies to sample `i` of a run. */
export function ruleFindings(
  rules: readonly ChosenRule[],
  parts: Parts,
  run: CloseRun,
  i: number,
  voltages: RuleVoltages,
): RuleFinding[] {
  if (rules.length === 0) return []
  const a = bitsAt(bodyBits(parts, run.a), run.atA[i]!)
  const b = bitsAt(bodyBits(parts, run.b), run.atB[i]!)
  const found: RuleFinding[] = []
  for (const chosen of rules) {
    if (!matches(chosen.rule, a, b) || !partsFit(chosen.rule.when, parts, run)) continue
    const { by, when } = chosen.rule
    const condition = voltages.all ?? (by.condition === 'lit' && !voltages.lit ? 'nameplate' : by.condition)
    const voltage = voltageBy(by, voltages[condition] ?? voltages.nameplate, parts, run)
    if (within(when.voltage, voltage)) found.push(ruleFinding(chosen, parts, run, i, voltage, condition))
  }
  return found
}

const within = (range: Range | undefined, value: number): boolean =>
  range === undefined || (value > range.above && value <= range.upTo)
const holds = <T>(wanted: readonly T[] | undefined, given: readonly T[]): boolean =>
  wanted === undefined || given.some((one) => wanted.includes(one))

/** Do the supplies, leads, tubes and metal of the two parts meet the conditions? */
function partsFit(when: Conditions, parts: Parts, run: CloseRun): boolean {
  const bodies = [bodyOf(parts, run.a), bodyOf(parts, run.b)]
  const circuits = circuitsOf(parts, run)
  if (when.circuits && (circuits.length === 1 ? 'same' : 'different') !== when.circuits) return false
  if (
    !suppliesFit(
      when,
      circuits.map((c) => parts.supplies[c]!),
    )
  )
    return false
  const leads = bodies.filter((body) => body?.kind === 'lead')
  const tubes = bodies.filter((body) => body?.kind === 'tube')
  const bars = bodies.filter((body) => body?.kind === 'bar')
  return (
    holds(
      when.conduit,
      leads.map((lead) => lead.conduit),
    ) &&
    holds(
      when.fill,
      tubes.map((tube) => tube.fill),
    ) &&
    (when.metal === undefined ||
      (bars.length > 0 && bars.some((bar) => within(when.metal, bar.line.length + 2 * bar.outerRadius))))
  )
}

/** Conditions on supplies: of two, one that meets them is enough for words, the higher figure counts for ranges. */
export function suppliesFit(when: Conditions, supplies: readonly Supply[]): boolean {
  if (when.supply && !supplies.some(({ type }) => type === when.supply)) return false
  if (
    !holds(
      when.grounding,
      supplies.map(({ grounding }) => grounding),
    )
  )
    return false
  const asked = when.openCircuitProtection
  if (asked !== undefined && !supplies.some(({ openCircuitProtection: has }) => has === asked)) return false
  const highest = (figure: (supply: Supply) => number) => Math.max(0, ...supplies.map(figure))
  return (
    (when.frequency === undefined ||
      within(
        when.frequency,
        highest((s) => s.frequency),
      )) &&
    (when.noLoad === undefined || within(when.noLoad, highest(noLoadVoltage))) &&
    (when.terminal === undefined || within(when.terminal, highest(terminalVoltage)))
  )
}

/** No-load voltage of a terminal to ground: all of it where terminal 2 is grounded, half of it else, V rms. */
export const terminalVoltage = (supply: Supply): number =>
  noLoadVoltage(supply) * (supply.grounding === 'one-end' ? 1 : 0.5)

function voltageBy(by: VoltageBasis, place: PlaceVoltage, parts: Parts, run: CloseRun): number {
  if (by.of === 'no-load') {
    const highest = Math.max(0, ...circuitsOf(parts, run).map((c) => noLoadVoltage(parts.supplies[c]!)))
    return by.times * highest * (by.value === 'peak' ? Math.SQRT2 : 1)
  }
  return by.times * (by.of === 'to-ground' ? place.toGround() : place)[by.value]
}

function ruleFinding(
  { set, rule, factor }: ChosenRule,
  parts: Parts,
  run: CloseRun,
  i: number,
  voltage: number,
  condition: Condition,
): RuleFinding {
  const gap = run.gap[i]! - (rule.fromConduit ? insideConduit(parts, run) : 0)
  const { distance } = rule
  const needs = (typeof distance === 'number' ? distance : distanceAt(distance, voltage)) * factor
  const severity = severityOf({ set, rule, factor }, gap, voltage)
  return {
    set,
    clause: rule.clause,
    mark: rule.mark,
    needs: needs + run.gap[i]! - gap,
    ok: severity === undefined ? gap >= needs - sameDistance : severity <= 1,
    condition,
    ...(severity !== undefined && { severity }),
    advice: rule.advice,
  }
}

/**
 * The voltage over what the gap may have; absent where the wiring cannot change what the rule asks for: fixed
 * distances, no-load voltage, and gaps under the lowest step of a table.
 */
function severityOf(
  { rule: { distance, by }, factor }: ChosenRule,
  gap: number,
  voltage: number,
): number | undefined {
  if (typeof distance === 'number' || by.of === 'no-load') return undefined
  const allowed = voltageAt(distance, gap / factor)
  if (allowed > 0) return Math.min(severityCap, voltage / allowed)
  if (distance.interpolation === 'step') return undefined
  return voltage > 1e-3 ? severityCap : 0
}

/** How far the surface of a lead lies inside its conduit, m. */
function insideConduit(parts: Parts, run: CloseRun): number {
  const depth = [bodyOf(parts, run.a), bodyOf(parts, run.b)].map((body) =>
    body?.kind === 'lead' ? Math.max(0, (body.boreRadius ?? 0) - body.outerRadius) : 0,
  )
  return Math.max(...depth)
}
