/** What the chosen rule sets say of a circuit as a whole. SI. */
import type { LeadBody } from '../geometry/conductors.js'
import type { Supply, Tube } from '../layout/layout.js'
import { magnitude } from '../math/complex.js'
import type { CircuitOutcome } from '../network/solution.js'
import { noLoadVoltage, supplyEfficiency } from '../network/supplies.js'
import type { CircuitRuleFinding } from './findings.js'
import { suppliesFit, terminalVoltage } from './pair-rules.js'
import type { CircuitRule, Quantity, RequiredRule, Rule, RuleSet } from './rule-set.js'

/** A circuit in the words of rules. */
export interface CircuitFacts {
  readonly supply: Supply
  readonly tubes: readonly Tube[]
  readonly tubeLength: number
  readonly leads: readonly { readonly body: LeadBody; readonly feed: boolean }[]
  readonly outcome?: CircuitOutcome
  /** share of the maker's chart, where there is one */
  readonly chartShare?: number
}

/** The verdict of every rule that applies to the circuit, in the order of the sets. */
export const circuitRuleFindings = (sets: readonly RuleSet[], facts: CircuitFacts): CircuitRuleFinding[] =>
  sets.flatMap((set) =>
    set.rules.flatMap((rule): CircuitRuleFinding[] => {
      if (rule.kind !== 'circuit' && rule.kind !== 'required') return []
      if (!applies(rule, facts)) return []
      const found = rule.kind === 'circuit' ? limitFinding(rule, facts) : requiredFinding(rule, facts.supply)
      const { clause, mark, advice } = rule
      return found ? [{ set: set.id, clause, mark, advice, ...found }] : []
    }),
  )

function applies({ when }: Rule, { supply, tubes, leads }: CircuitFacts): boolean {
  return (
    suppliesFit(when, [supply]) &&
    (when.fill === undefined || tubes.some(({ fill }) => when.fill?.includes(fill))) &&
    (when.conduit === undefined || leads.some(({ body }) => when.conduit?.includes(body.conduit)))
  )
}

type Found<Kind extends CircuitRuleFinding['kind']> = Omit<
  Extract<CircuitRuleFinding, { kind: Kind }>,
  'set' | 'clause' | 'mark' | 'advice'
>

function limitFinding(rule: CircuitRule, facts: CircuitFacts): Found<'limit'> | undefined {
  const limit = limitAt(rule, terminalVoltage(facts.supply))
  const lengths = leadLengths(rule, facts)
  const value =
    lengths === undefined
      ? quantityOf(rule.quantity, facts)
      : lengths.length > 0
        ? Math.max(...lengths.map(({ length }) => length))
        : undefined
  if (value === undefined) return undefined
  const over = (figure: number) => figure > limit * (1 + 1e-9)
  return {
    kind: 'limit',
    quantity: rule.quantity,
    value,
    limit,
    verdict: over(value) ? rule.verdict : 'within',
    parts: lengths?.flatMap(({ name, length }) => (over(length) ? [name] : [])) ?? [],
    inMetalConduit: rule.when.conduit?.every((conduit) => conduit === 'metal') ?? false,
  }
}

const requiredFinding = ({ requires }: RequiredRule, supply: Supply): Found<'required'> => {
  const has =
    requires === 'open-circuit-protection'
      ? supply.openCircuitProtection
      : supply.groundFaultTrip !== undefined
  return { kind: 'required', requires, verdict: has ? 'within' : 'watch', parts: [] }
}

function limitAt({ atMost }: CircuitRule, terminal: number): number {
  if (typeof atMost === 'number') return atMost
  const row = atMost.voltages.findLastIndex((from) => from < terminal)
  return atMost.limits[Math.max(0, row)]!
}

/** The leads that a limit of length is about, one by one; nothing where the quantity is another. */
function leadLengths(
  { quantity, when }: CircuitRule,
  { leads }: CircuitFacts,
): { name: string; length: number }[] | undefined {
  if (quantity !== 'lead-m' && quantity !== 'output-lead-m') return undefined
  return leads.flatMap(({ body, feed }) =>
    (feed || quantity === 'lead-m') && (when.conduit?.includes(body.conduit) ?? true)
      ? [{ name: body.name, length: body.line.length }]
      : [],
  )
}

/** The figure of a circuit, where it is known; SI. */
function quantityOf(quantity: Quantity, facts: CircuitFacts): number | undefined {
  const { supply, outcome } = facts
  const lit = outcome?.lit ? outcome : undefined
  switch (quantity) {
    case 'no-load-kv':
      return noLoadVoltage(supply)
    case 'terminal-kv':
      return terminalVoltage(supply)
    case 'needed-kv':
      return outcome?.neededVoltage
    case 'short-circuit-ma':
      return supply.shortCircuitCurrent
    case 'terminal-ma':
      return lit && Math.max(...lit.terminalCurrent.map(magnitude))
    case 'residual-ma':
      return lit && magnitude(lit.residual)
    case 'rated-va':
      return supply.ratedPower
    case 'mains-va':
      return lit && lit.power / supplyEfficiency
    case 'load':
      return outcome?.neededVoltage === undefined ? undefined : outcome.neededVoltage / noLoadVoltage(supply)
    case 'chart-share':
      return facts.chartShare
    case 'tube-m':
      return facts.tubeLength
    case 'all-leads-m':
      return facts.leads.reduce((sum, { body }) => sum + body.line.length, 0)
    case 'lead-m':
    case 'output-lead-m':
      return undefined
  }
}
