/** Values of a rule file with the right form → RuleSet in SI units. */
import type { RangeValue, RuleFileValue, RuleValue } from './rule-schema.js'
import {
  type CircuitRule,
  type Conditions,
  type DistanceTable,
  type Mark,
  type PairRule,
  type PartWord,
  partBits,
  quantities,
  type Range,
  type Rule,
  type RuleSet,
} from './rule-set.js'

const kilo = 1000
const milli = 0.001
/** folded texts of YAML end in a newline */
const oneLine = (text: string | number | undefined): string =>
  String(text ?? '')
    .replace(/\s+/g, ' ')
    .trim()

export const builtRuleSet = (file: RuleFileValue): RuleSet => ({
  id: String(file.id),
  title: oneLine(file.title),
  edition: oneLine(file.edition),
  source: oneLine(file.source),
  mark: file.mark,
  note: oneLine(file.note),
  rules: file.rules.map((rule) => builtRule(rule, file.mark)),
})

function builtRule(value: RuleValue, mark: Mark): Rule {
  const common = {
    clause: oneLine(value.clause),
    mark: value.mark ?? mark,
    ...(value.source !== undefined && { source: oneLine(value.source) }),
    advice: oneLine(value.advice),
    when: conditions(value.when ?? {}),
  }
  if (value.limit) return { ...common, ...limited(value.limit) }
  if (value.requires) return { ...common, kind: 'required', requires: value.requires }
  const distance = value.distance_mm === undefined ? table(value) : value.distance_mm * milli
  return distance === undefined ? { ...common, kind: 'remark' } : { ...common, ...pairRule(value, distance) }
}

const sum = (words: readonly PartWord[]): number => words.reduce((bits, word) => bits | partBits[word], 0)

function pairRule(
  value: RuleValue,
  distance: number | DistanceTable,
): Omit<PairRule, 'clause' | 'mark' | 'advice' | 'when'> {
  const one = value.between ?? []
  return {
    kind: 'pair',
    sides: [sum(one), sum(value.and ?? one)],
    by: {
      condition: value.by?.condition ?? 'nameplate',
      value: value.by?.value ?? 'rms',
      of: value.by?.of ?? 'difference',
      times: value.by?.times ?? 1,
    },
    distance,
    altitude: value.altitude_factor ?? [],
    fromConduit: value.from === 'conduit',
  }
}

function table({ table_kv_mm: rows, interpolation, beyond }: RuleValue): DistanceTable | undefined {
  if (!rows) return undefined
  return {
    voltages: rows.map(([kv]) => kv * kilo),
    distances: rows.map(([, mm]) => mm * milli),
    interpolation: interpolation ?? 'linear',
    beyond: beyond ?? (interpolation === 'step' ? 'last' : 'slope'),
  }
}

function limited(
  limit: NonNullable<RuleValue['limit']>,
): Pick<CircuitRule, 'kind' | 'quantity' | 'atMost' | 'verdict'> {
  const scale = quantities[limit.quantity]
  const rows = limit.by_terminal_kv ?? []
  const atMost =
    limit.at_most === undefined
      ? { voltages: rows.map(([kv]) => kv * kilo), limits: rows.map(([, most]) => most * scale) }
      : limit.at_most * scale
  return { kind: 'circuit', quantity: limit.quantity, atMost, verdict: limit.verdict ?? 'fix' }
}

function range(value: RangeValue, scale: number): Range {
  return { above: (value.above ?? -Infinity) * scale, upTo: (value.up_to ?? Infinity) * scale }
}

function conditions(when: NonNullable<RuleValue['when']>): Conditions {
  return {
    ...(when.supply && { supply: when.supply }),
    ...(when.grounding && { grounding: when.grounding }),
    ...(when.frequency_hz && { frequency: range(when.frequency_hz, 1) }),
    ...(when.no_load_kv && { noLoad: range(when.no_load_kv, kilo) }),
    ...(when.terminal_kv && { terminal: range(when.terminal_kv, kilo) }),
    ...(when.conduit && { conduit: when.conduit }),
    ...(when.fill && { fill: when.fill }),
    ...(when.circuits && { circuits: when.circuits }),
    ...(when.open_circuit_protection !== undefined && {
      openCircuitProtection: when.open_circuit_protection,
    }),
    ...(when.kv && { voltage: range(when.kv, kilo) }),
    ...(when.metal_mm && { metal: range(when.metal_mm, milli) }),
  }
}
