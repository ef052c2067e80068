import { expect, test } from 'vitest'
import { resolveRules, shippedNames } from '../../src/rules/resolve.js'
import { shopText } from './signs.js'

const shop = shopText('- {clause: a, between: [tube], distance_mm: 4}')

test('shipped names and files, in the order asked for, each once', () => {
  const { sets, missing } = resolveRules(['shop.yaml', 'nec-600', 'shop.yaml', 'common-practice'], (path) =>
    path === 'shop.yaml' ? shop : undefined,
  )
  expect(sets.map((set) => set.id)).toEqual(['shop', 'nec-600', 'common-practice'])
  expect(missing).toEqual([])
})

test('a set that is nowhere is missing with what was perhaps meant; the others are there', () => {
  const { sets, missing } = resolveRules(['nec-60', 'common-practice', 'ours.yaml'])
  expect(sets.map((set) => set.id)).toEqual(['common-practice'])
  expect(missing).toEqual([
    {
      name: 'nec-60',
      complaint:
        'nec-60: there is no such rule set and no such file beside the layout, did you mean nec-600?',
    },
    {
      name: 'ours.yaml',
      complaint: `ours.yaml: there is no such rule set and no such file beside the layout, expected a rule file or one of ${shippedNames.join(', ')}`,
    },
  ])
})

test('a broken file is missing with all its faults', () => {
  const broken = shop.replace('tube', 'tubee').replace('mark: own', 'mark: none')
  const { sets, missing } = resolveRules(['shop.yaml', 'gb-50303'], () => broken)
  expect(sets.map((set) => set.id)).toEqual(['gb-50303'])
  expect(missing[0]?.complaint.split('\n\n')).toHaveLength(2)
  expect(missing[0]?.complaint).toContain('shop.yaml:6:7: mark')
})

test('an id can be used once, and not that of a shipped set', () => {
  const files: Record<string, string> = {
    'a.yaml': shop,
    'b.yaml': shop,
    'c.yaml': shop.replace('id: shop', 'id: nec-600'),
  }
  const { sets, missing } = resolveRules(['a.yaml', 'b.yaml', 'c.yaml'], (path) => files[path])
  expect(sets.map((set) => set.id)).toEqual(['shop'])
  expect(missing.map((m) => m.complaint)).toEqual([
    'b.yaml: its id shop is already that of another set of this sign',
    'c.yaml: its id nec-600 is that of a shipped set, expected another',
  ])
})

test('a name cannot act on the terminal', () => {
  const { missing } = resolveRules(['\u001b[31mred'])
  expect(missing[0]?.complaint).toMatch(/^\\x1b\[31mred: /)
})
