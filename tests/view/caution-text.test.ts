import { describe, expect, test } from 'vitest'
import type { Caution, Loading, PairFinding } from '../../src/rules/findings.js'
import { resolveRules } from '../../src/rules/resolve.js'
import { cautionText } from '../../src/view/caution-text.js'
import { onPaper, shopText, twoTubes } from '../rules/signs.js'

const said = (caution: Caution, units: 'mm' | 'in' = 'mm') => cautionText(caution, units)

function pair(gap: number, rules: readonly string[] = ['common-practice']): PairFinding {
  const [worst] = onPaper(twoTubes({ gap, kv: 6, type: 'core-and-coil', hertz: 50 }), rules).pairs
  if (!worst) throw new Error('no pair')
  return worst
}

describe('the worst pair', () => {
  test('with its gap, kV rms and need, and how many more are to fix', () => {
    const caution: Caution = { level: 'fix', code: 'pairs', pair: pair(10), fix: 2, watch: 1 }
    expect(said(caution)).toBe(
      'A @0.0 to B @0.0: gap 10 mm at 6.0 kV rms on paper, needs 25 mm by common-practice: thumb; 2 more to fix, 1 to watch.',
    )
    expect(said(caution, 'in')).toContain('gap 0.39 in at 6.0 kV rms on paper, needs 0.98 in by')
  })
  test('a gap that rounds to what is needed shows its tenths', () => {
    expect(said({ level: 'fix', code: 'pairs', pair: pair(24.6), fix: 0, watch: 0 })).toBe(
      'A @0.0 to B @0.0: gap 24.6 mm at 6.0 kV rms on paper, needs 25 mm by common-practice: thumb.',
    )
  })
  test('a lit difference is not on paper', () => {
    const lit: PairFinding = {
      ...pair(10),
      difference: { ...pair(10).difference, lit: 3456, litLow: 1, litHigh: 2 },
    }
    expect(said({ level: 'fix', code: 'pairs', pair: lit, fix: 0, watch: 0 })).toContain(
      'at 3.5 kV rms, needs',
    )
  })
})

test('a dark circuit names why and its tubes in order', () => {
  const dark: Caution = {
    level: 'fix',
    code: 'dark',
    supply: 'S1',
    why: 'needs-more-than-no-load',
    neededVoltage: 5120,
    noLoadVoltage: 4000,
    dark: ['K', 'I', 'O'],
  }
  expect(said(dark)).toBe(
    'S1 cannot light its whole string: it takes 5.1 kV rms and the supply has 4.0 kV at no load. K goes dark first (then I, O). Its pairs are judged on nameplate.',
  )
  expect(said({ ...dark, why: 'not-enough-current', dark: ['K'] })).toBe(
    'S1 cannot light its whole string: stray capacitance takes the current before it reaches the far tubes. K goes dark first. Its pairs are judged on nameplate.',
  )
})

test('stray says what is left, not a difference of phasors', () => {
  const stray: Caution = {
    level: 'watch',
    code: 'stray',
    supply: 'S1',
    tube: 'W3',
    least: 0.0204,
    given: 0.03,
    tubeLength: 9,
    onMetal: true,
  }
  expect(said(stray)).toBe(
    'S1: only 20.4 of 30.0 mA reach W3; stray capacitance takes current on the way, over 9.00 m of glass. Electronic supplies are not for long runs on metal (common practice).',
  )
  expect(said({ ...stray, onMetal: false })).not.toContain('metal')
})

test.each<[Loading['by'], number, number, string]>([
  ['voltage', 4100, 5000, 'S1 runs at 82 % of its no-load voltage (4.1 kV of 5.0 kV rms).'],
  ['chart', 10.8, 8, "S1 carries 135 % of the maker's chart (10.8 m of 8.00 m with electrode pairs)."],
  ['mains', 116, 120, 'S1 draws 97 % of its rated input (about 116 W of 120 W).'],
  ['residual', 0.0145, 0.015, 'S1 returns 14.5 mA through ground: 97 % of the 15.0 mA that trips it.'],
  ['lead', 1.005, 0.5, 'S1 has an output lead of 1005 mm; its leads allow 500 mm.'],
])('loading by %s', (by, value, limit, text) => {
  const loading: Loading = { by, value, limit, share: value / limit, verdict: 'fix' }
  expect(said({ level: 'fix', code: 'loading', supply: 'S1', loading })).toBe(text)
})

describe('circuit rules', () => {
  const finding = (rule: string) => {
    const found = onPaper(twoTubes({ kv: 9 }), ['shop.yaml'], shopText(rule))
    const caution = found.cautions.find((c) => c.code === 'rule')
    if (!caution) throw new Error('no caution')
    return said(caution)
  }
  test('name quantity, figure, limit, set, clause and advice', () => {
    expect(finding('- {clause: "7", advice: go lower, limit: {quantity: no-load-kv, at_most: 7.5}}')).toBe(
      'S1: no-load voltage is 9.0 kV, at most 7.5 kV by shop: 7 – go lower.',
    )
  })
  test('name the leads that are over a length', () => {
    expect(finding('- {clause: short, limit: {quantity: output-lead-m, at_most: 0.1}}')).toMatch(
      /^S1: longest output lead is \d\.\d\d m \(S1\.1–A\.a, B\.a–S1\.2\), at most 0\.10 m by shop: short\.$/,
    )
  })
  test('say what is not stated', () => {
    expect(finding('- {clause: p, requires: open-circuit-protection}')).toBe(
      'S1: no open-circuit protection is stated (shop: p).',
    )
  })
})

test('a missing set is named with its first fault and the number of the others', () => {
  const broken = shopText('- {clause: a, between: [tubee], distance_mm: -1}')
  const { missing } = resolveRules(['shop.yaml', 'gone'], (path) =>
    path === 'shop.yaml' ? broken : undefined,
  )
  expect(said({ level: 'fix', code: 'rules-missing', missing })).toMatch(
    /^Rule set missing, so not judged by it: shop\.yaml:8:\d+: between, entry 1 is the text "tubee", did you mean "tube"\? \(and 1 more\); gone: there is no such rule set .*\.$/,
  )
})

test.each([
  [0.3, '30 %'],
  [0.05, '5 %'],
])('what may go dark is told with its band of %f', (band, share) => {
  expect(said({ level: 'watch', code: 'may-go-dark', supply: 'S1', band })).toBe(
    `S1 lights the string by the gradient law, but not if the glass takes ${share} more: the sign may go dark.`,
  )
})

test('floating metal with the current through a person, where that could be solved', () => {
  const metal = { level: 'danger', code: 'floating-metal', id: 'frame', voltage: 1200 } as const
  expect(said({ ...metal, touch: 0.0012 })).toContain('1.2 kV rms, and 1.2 mA would flow through a person')
  expect(said(metal)).toContain('1.2 kV rms, and an unknown current would flow through a person')
})
