import { expect } from 'vitest'
import { type Inspection, inspection, prepare } from '../../src/inspection.js'
import type { Layout } from '../../src/layout/layout.js'
import { parseLayout } from '../../src/layout/parse.js'
import type { PairFinding, RuleFinding } from '../../src/rules/findings.js'
import { parseRuleSet } from '../../src/rules/parse-rules.js'
import { type ResolvedRules, resolveRules } from '../../src/rules/resolve.js'
import type { RuleSet } from '../../src/rules/rule-set.js'

export function layoutOf(text: string): Layout {
  const { layout, problems } = parseLayout(text, 'sign.yaml')
  expect(problems).toEqual([])
  if (!layout) throw new Error('no layout')
  return layout
}

/** What a test says of a sign of two straight tubes of 12 mm, both 1 m long, one above the other. */
export interface TwoTubes {
  /** clear gap between the tubes, mm */
  readonly gap?: number
  readonly kv?: number
  readonly type?: 'electronic' | 'core-and-coil'
  readonly hertz?: number
  readonly grounding?: 'midpoint' | 'one-end' | 'none'
  readonly fill?: 'neon' | 'argon-mercury'
  readonly boots?: boolean
  readonly height?: number
  readonly face?: 'none' | 'grounded' | 'floating'
  readonly altitude?: number
  /** further lines of the supply, of the circuit's leads, and of the file */
  readonly supply?: string
  readonly leads?: string
  readonly more?: string
  readonly string?: string
}

/**
 * A above B, both from left to right. In the string [A, -B] the current goes along A and back along B, so the
 * difference is the whole no-load voltage at the left ends and nothing at the right ones.
 */
export const twoTubes = (sign: TwoTubes = {}): Layout =>
  layoutOf(`layout: 1
title: two tubes
units: mm
altitude_m: ${sign.altitude ?? 0}
face: {size: [3000, 3000], metal: ${sign.face ?? 'none'}}
defaults:
  tube: {diameter: 12, wall: 1, glass: soda-lime, fill: ${sign.fill ?? 'argon-mercury'}, height: ${sign.height ?? 300}, boots: ${sign.boots ?? true}}
  lead: {conductor: 1.2, diameter: 7, insulation: silicone, height: ${sign.height ?? 300}}
tubes:
  - {id: A, path: [[1000, 1000], [2000, 1000]]}
  - {id: B, path: [[1000, ${1012 + (sign.gap ?? 100)}], [2000, ${1012 + (sign.gap ?? 100)}]]}
supplies:
  - id: S1
    type: ${sign.type ?? 'electronic'}
    no_load_kv: ${sign.kv ?? 6}
    short_circuit_ma: 30
    frequency_hz: ${sign.hertz ?? 24000}
    grounding: ${sign.grounding ?? 'midpoint'}
    terminals: [[500, 900, 300], [500, 1300, 300]]
    ${(sign.supply ?? '').replaceAll('\n', '\n    ')}
circuits:
  - supply: S1
    string: ${sign.string ?? '[A, -B]'}
    ${sign.leads ? `leads:\n      ${sign.leads.replaceAll('\n', '\n      ')}` : ''}
${sign.more ?? ''}
`)

/** The findings on paper, with rule sets by name or a shop's text under the name `shop.yaml`. */
export function onPaper(
  layout: Layout,
  rules: readonly string[] = ['common-practice'],
  shop?: string,
): Inspection {
  const resolved: ResolvedRules = resolveRules(rules, (path) => (path === 'shop.yaml' ? shop : undefined))
  return inspection(prepare(layout, resolved), layout.wiring)
}

/** The finding between two parts (the first where there are several places). */
export function pairOf(found: Inspection, a: string, b: string): PairFinding {
  const pair = found.pairs.find(
    (p) => (p.a.part === a && p.b.part === b) || (p.a.part === b && p.b.part === a),
  )
  if (!pair) throw new Error(`no pair ${a} – ${b}; there are ${found.pairs.map((p) => p.key).join(', ')}`)
  return pair
}

export const ruleOf = (pair: PairFinding, clause: string): RuleFinding | undefined =>
  pair.rules.find((r) => r.clause === clause)

/** A shop's rule set around the given rules (YAML, each beginning with "- "). */
export const shopText = (rules: string): string =>
  `rule_set: 1
id: shop
title: A shop
edition: "1"
source: invented for a test
mark: own
rules:
${rules
  .split('\n')
  .map((line) => `  ${line}`)
  .join('\n')}
`

export function shopSet(rules: string): RuleSet {
  const { set, texts } = parseRuleSet(shopText(rules), 'shop.yaml')
  expect(texts).toEqual([])
  if (!set) throw new Error('no set')
  return set
}
