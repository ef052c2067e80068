import { expect, test } from 'vitest'
import { shippedNames, shippedSet } from '../../src/rules/resolve.js'
import { ruleSetLines } from '../../src/view/rule-text.js'
import { shopSet } from '../rules/signs.js'

test('a set with every kind of rule, in words', () => {
  const set = shopSet(`- clause: "1"
  advice: keep off
  between: [lead]
  and: [metal, face]
  when: {supply: electronic, conduit: [none, nonmetallic], frequency_hz: {above: 100}, kv: {above: 2, up_to: 5}}
  distance_mm: 45
- {clause: "2", mark: M, between: [bare], by: {value: peak, times: 1.25}, table_kv_mm: [[1, 1], [5, 10]], altitude_factor: [[2000, 1], [3000, 1.14]]}
- {clause: "3", between: [tube], by: {of: no-load}, table_kv_mm: [[0, 20], [6, 30]], interpolation: step}
- {clause: "4", limit: {quantity: lead-m, by_terminal_kv: [[0, 20], [2, 10]]}}
- {clause: "5", when: {grounding: [none]}, requires: ground-fault-protection}
- {clause: "6", advice: look}`)
  expect(ruleSetLines(set, 100)).toEqual([
    'shop  A shop',
    "  edition 1; source: invented for a test [own: the shop's own]",
    '    1  lead to metal or face: 45 mm (electronic, above 100 Hz, conduit none or nonmetallic, above 2',
    '    kV up to 5 kV)',
    '        keep off',
    '    2  bare to bare: 1 mm at 1 kV, 10 mm at 5 kV, linear between, of 1.25 times the nameplate',
    '    difference, peak, more at altitude [M]',
    '    3  tube to tube: 20 mm above 0 kV, 30 mm above 6 kV of nameplate no-load voltage, rms',
    '    4  longest lead at most 20.0 m above 0 kV to ground, 10.0 m above 2 kV to ground',
    '    5  ground fault protection must be stated (grounding none)',
    '    6  for the eye, not judged',
    '        look',
  ])
})

test('every shipped set is told in lines of the width asked for, with its clauses and source', () => {
  for (const name of shippedNames) {
    const set = shippedSet(name)
    if (!set) throw new Error(name)
    const lines = ruleSetLines(set, 72)
    expect(Math.max(...lines.map((l) => l.length))).toBeLessThanOrEqual(72)
    const text = lines.join(' ').replace(/ +/g, ' ')
    expect(text).toContain(set.source)
    for (const rule of set.rules) expect(text).toContain(rule.clause)
  }
})
