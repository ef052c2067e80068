/** Rule sets in words: what a rule asks for, when, by which voltage, and how sure its figure is. */
import {
  type CircuitRule,
  type Conditions,
  type DistanceTable,
  type Mark,
  type PairRule,
  partBits,
  type Range,
  type Rule,
  type RuleSet,
} from '../rules/rule-set.js'
import { quantityFigure, quantityName } from './caution-text.js'
import { hertz } from './words.js'
import { wrap } from './wrap.js'

export const markText: Record<Mark, string> = {
  R: 'read in the text',
  S: 'second-hand',
  S2: 'two independent codings agree',
  M: 'from memory',
  practice: 'common practice',
  own: "the shop's own",
}

const mm = (distance: number): string => `${Number((distance * 1000).toFixed(2))} mm`
const kilovolts = (voltage: number): string => `${Number((voltage / 1000).toFixed(3))} kV`
const anyOf = (words: readonly string[]): string => words.join(' or ')

/** A set with all its rules, in lines of at most `columns` characters. */
export function ruleSetLines(set: RuleSet, columns: number): string[] {
  const paragraph = (text: string, indent: number): string[] =>
    wrap(text, columns - indent).map((line) => `${' '.repeat(indent)}${line}`)
  return [
    ...paragraph(`${set.id}  ${set.title}`, 0),
    ...paragraph(`edition ${set.edition}; source: ${set.source} [${set.mark}: ${markText[set.mark]}]`, 2),
    ...(set.note === '' ? [] : paragraph(set.note, 2)),
    ...set.rules.flatMap((rule) => [
      ...paragraph(`${rule.clause}  ${requirement(rule)}${markOf(rule, set)}`, 4),
      ...(rule.advice === '' ? [] : paragraph(rule.advice, 8)),
      ...(rule.source === undefined ? [] : paragraph(`source: ${rule.source}`, 8)),
    ]),
  ]
}

const markOf = (rule: Rule, set: RuleSet): string => (rule.mark === set.mark ? '' : ` [${rule.mark}]`)

function requirement(rule: Rule): string {
  const when = conditionWords(rule.when)
  const only = when.length > 0 ? ` (${when.join(', ')})` : ''
  switch (rule.kind) {
    case 'pair':
      return `${sideWords(rule.sides)}: ${distanceWords(rule)}${only}`
    case 'circuit':
      return `${limitWords(rule)}${only}`
    case 'required':
      return `${rule.requires.replaceAll('-', ' ')} must be stated${only}`
    case 'remark':
      return 'for the eye, not judged'
  }
}

function sideWords([one, two]: readonly [number, number]): string {
  const words = (bits: number) =>
    anyOf(Object.entries(partBits).flatMap(([word, bit]) => ((bits & bit) !== 0 ? [word] : [])))
  return one === two ? `${words(one)} to ${words(one)}` : `${words(one)} to ${words(two)}`
}

function distanceWords({ distance, by, altitude, fromConduit }: PairRule): string {
  const factor = altitude.length > 0 ? ', more at altitude' : ''
  if (typeof distance === 'number') return `${mm(distance)}${fromConduit ? ' from the conduit' : ''}${factor}`
  const of = { difference: 'difference', 'to-ground': 'voltage to ground', 'no-load': 'no-load voltage' }[
    by.of
  ]
  const times = by.times === 1 ? '' : `${by.times} times the `
  const basis = `${times}${by.condition === 'broken' ? 'open-tube' : by.condition} ${of}, ${by.value}`
  return `${tableWords(distance)} of ${basis}${factor}`
}

/** all rows of a short table, both ends of a long one */
function tableWords({ voltages, distances, interpolation }: DistanceTable): string {
  const row = (i: number) => `${mm(distances[i]!)} at ${kilovolts(voltages[i]!)}`
  const last = voltages.length - 1
  if (interpolation === 'step')
    return voltages.map((from, i) => `${mm(distances[i]!)} above ${kilovolts(from)}`).join(', ')
  const rows = last > 3 ? [row(0), `… (${last + 1} rows)`, row(last)] : voltages.map((_, i) => row(i))
  return `${rows.join(', ')}, linear between,`
}

function limitWords({ quantity, atMost }: CircuitRule): string {
  const figure = (value: number) => quantityFigure(quantity, value)
  const most =
    typeof atMost === 'number'
      ? figure(atMost)
      : atMost.limits
          .map((limit, i) => `${figure(limit)} above ${kilovolts(atMost.voltages[i]!)} to ground`)
          .join(', ')
  return `${quantityName(quantity)} at most ${most}`
}

function rangeWords({ above, upTo }: Range, figure: (value: number) => string): string {
  const low = above > -Infinity ? [`above ${figure(above)}`] : []
  const high = upTo < Infinity ? [`up to ${figure(upTo)}`] : []
  return [...low, ...high].join(' ')
}

function conditionWords(when: Conditions): string[] {
  const range = (name: string, value: Range | undefined, figure: (value: number) => string) =>
    value ? [`${name}${rangeWords(value, figure)}`] : []
  return [
    ...(when.supply ? [when.supply] : []),
    ...(when.grounding ? [`grounding ${anyOf(when.grounding)}`] : []),
    ...range('', when.frequency, hertz),
    ...range('no-load ', when.noLoad, kilovolts),
    ...range('terminal to ground ', when.terminal, kilovolts),
    ...(when.conduit ? [`conduit ${anyOf(when.conduit)}`] : []),
    ...(when.fill ? [`fill ${anyOf(when.fill)}`] : []),
    ...(when.openCircuitProtection === undefined
      ? []
      : [`${when.openCircuitProtection ? 'with' : 'without'} open-circuit protection`]),
    ...(when.circuits ? [`${when.circuits === 'same' ? 'one circuit' : 'two circuits'}`] : []),
    ...range('', when.voltage, kilovolts),
    ...range('metal ', when.metal, mm),
  ]
}
