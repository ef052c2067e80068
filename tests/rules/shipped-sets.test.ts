import { describe, expect, test } from 'vitest'
import { shippedNames, shippedSet } from '../../src/rules/resolve.js'
import { partBits, type Rule, type RuleSet } from '../../src/rules/rule-set.js'

function set(name: string): RuleSet {
  const found = shippedSet(name)
  if (!found) throw new Error(`no set ${name}`)
  return found
}
const rulesOf = (name: string, clause: string): Rule[] => set(name).rules.filter((r) => r.clause === clause)

function bits(words: string): number {
  return words.split(' ').reduce((sum, word) => {
    const bit = Object.entries(partBits).find(([name]) => name === word)?.[1]
    if (bit === undefined) throw new Error(`no part word ${word}`)
    return sum | bit
  }, 0)
}

test('the sets that could be sourced are shipped, each with its source, edition and mark', () => {
  expect(shippedNames).toEqual([
    'common-practice',
    'nec-600',
    'ca-title8-2973',
    'iec-60664-1',
    'en-50107-1',
    'japan-186',
    'gb-50303',
  ])
  expect(shippedNames.map((name) => [set(name).id, set(name).mark])).toEqual([
    ['common-practice', 'practice'],
    ['nec-600', 'R'],
    ['ca-title8-2973', 'R'],
    ['iec-60664-1', 'S2'],
    ['en-50107-1', 'S'],
    ['japan-186', 'S'],
    ['gb-50303', 'R'],
  ])
  for (const name of shippedNames) {
    expect(set(name).source).not.toBe('')
    expect(set(name).edition).not.toBe('')
    for (const rule of set(name).rules) expect(rule.advice, rule.clause).not.toBe('')
  }
  expect(set('common-practice').source).toBe('common practice, no published source')
})

// every fixed distance that is shipped, in mm, from the sources named in each set
const distances: [string, string, string, string, number[]][] = [
  // NFPA 70 Article 600, 2017 and 2020 [R]
  ['nec-600', '600.32(E)', 'lead', 'lead metal', [38]],
  ['nec-600', '600.32(A)(4)', 'lead', 'grounded', [38, 45]],
  ['nec-600', '600.41(C)', 'glass', 'metal', [6]],
  ['nec-600', '600.7(B)(5)', 'tube', 'floating', [19]],
  // California Code of Regulations, Title 8, section 2973(b) [R]
  ['nec-600', 'California Title 8 §2973(b)', 'electrode', 'grounded', [38]],
  ['ca-title8-2973', '§2973(b)', 'electrode lead', 'grounded', [38]],
  // Japan, interpretation of the technical standards, article 186 [S]
  ['japan-186', 'wire to wire', 'lead', 'lead', [60]],
  // GB 50303-2002 21.1.2 [R]
  ['gb-50303', '21.1.2', 'tube lead', 'face', [20]],
  // common practice, no published source
  ['common-practice', 'output leads apart', 'feed', 'feed', [25]],
]

test.each(distances)('%s %s: %s to %s %j mm', (name, clause, one, two, expected) => {
  const rules = rulesOf(name, clause)
  expect(
    rules.map((r) => (r.kind === 'pair' && typeof r.distance === 'number' ? r.distance * 1000 : r.kind)),
  ).toEqual(expected)
  for (const rule of rules) expect(rule).toMatchObject({ sides: [bits(one), bits(two)] })
})

test('no other fixed distance is shipped', () => {
  const shipped = shippedNames.flatMap((name) =>
    set(name).rules.flatMap((r) => (r.kind === 'pair' && typeof r.distance === 'number' ? [r.clause] : [])),
  )
  expect(shipped).toHaveLength(distances.reduce((sum, [, , , , mm]) => sum + mm.length, 0))
})

describe('NFPA 70 Article 600, 2017 and 2020 [R]', () => {
  test('the conduit distance is 38 mm up to 100 Hz and 45 mm above', () => {
    expect(rulesOf('nec-600', '600.32(A)(4)').map((r) => r.when)).toMatchObject([
      { conduit: ['nonmetallic'], frequency: { above: -Infinity, upTo: 100 } },
      { conduit: ['nonmetallic'], frequency: { above: 100, upTo: Infinity } },
    ])
  })
  test.each([
    ['600.23(C)', 'no-load-kv', 15_000],
    ['600.23(C)', 'terminal-kv', 7500],
    ['600.23(D)', 'short-circuit-ma', 0.3],
  ])('%s: %s at most %f (SI)', (clause, quantity, atMost) => {
    expect(rulesOf('nec-600', clause)).toContainEqual(
      expect.objectContaining({ kind: 'circuit', quantity, atMost, verdict: 'fix' }),
    )
  })
  test('600.32(J)(1): terminal to first electrode 6 m in metal, 15 m in nonmetallic conduit', () => {
    expect(rulesOf('nec-600', '600.32(J)(1)')).toMatchObject([
      { quantity: 'output-lead-m', atMost: 6, when: { conduit: ['metal'] } },
      { quantity: 'output-lead-m', atMost: 15, when: { conduit: ['nonmetallic'] } },
    ])
  })
  test('600.7(B)(5) is about metal of up to 50 mm', () => {
    expect(rulesOf('nec-600', '600.7(B)(5)')[0]?.when.metal?.upTo).toBeCloseTo(0.05, 12)
  })
  test('600.23(B) asks for ground-fault protection unless the secondary is isolated and up to 7.5 kV', () => {
    expect(rulesOf('nec-600', '600.23(B)')).toMatchObject([
      { requires: 'ground-fault-protection', when: { grounding: ['midpoint', 'one-end'] } },
      { requires: 'ground-fault-protection', when: { grounding: ['none'], noLoad: { above: 7500 } } },
    ])
  })
  test('what a layout cannot show is listed and not judged', () => {
    for (const clause of ['600.21(B)', '600.23(E)', '600.32(G)', '600.41(B), 600.42(D)'])
      expect(rulesOf('nec-600', clause)).toMatchObject([{ kind: 'remark' }])
  })
})

describe('EN 50107-1:2002 with A1:2004', () => {
  // second-hand [S]: longest unscreened run by nominal kV to earth at 50 Hz, mercury / neon
  test.each([
    ['unscreened cable, mercury', [40, 30, 20, 15]],
    ['unscreened cable, neon', [20, 15, 10, 7.5]],
  ])('%s: %j m up to 1, 2, 3 and 4 kV to earth', (clause, limits) => {
    expect(rulesOf('en-50107-1', clause)).toMatchObject([
      {
        quantity: 'lead-m',
        atMost: { voltages: [0, 1000, 2000, 3000], limits },
        when: { terminal: { upTo: 4000 } },
      },
    ])
  })
  test('10 kV in total and 5 kV to earth [S]; no clearance is shipped, since its table could not be sourced', () => {
    expect(rulesOf('en-50107-1', 'voltage in total')).toMatchObject([
      { quantity: 'no-load-kv', atMost: 10_000 },
    ])
    expect(rulesOf('en-50107-1', 'voltage to earth')).toMatchObject([
      { quantity: 'terminal-kv', atMost: 5000 },
    ])
    expect(set('en-50107-1').rules.filter((r) => r.kind === 'pair')).toEqual([])
  })
})

test('IEC 60664-1 goes by the nameplate peak, 1.25 times it above 1 kHz, on bare live parts only', () => {
  expect(set('iec-60664-1').rules).toMatchObject([
    { by: { condition: 'nameplate', value: 'peak', times: 1 }, when: { frequency: { upTo: 1000 } } },
    { by: { condition: 'nameplate', value: 'peak', times: 1.25 }, when: { frequency: { above: 1000 } } },
  ])
  for (const rule of set('iec-60664-1').rules)
    expect(rule).toMatchObject({ sides: [bits('bare'), bits('bare metal')] })
})
