import fc from 'fast-check'
import stringWidth from 'string-width'
import { expect, test } from 'vitest'
import { folded, table, withoutMiddle } from '../../src/report/table.js'

test('figures to the right, words to the left, nothing behind the last cell', () => {
  const rows = [
    ['tube', 'kV', 'route'],
    ['K', '0.78', 'drawn'],
    ['flourish', '12.3', 'assumed'],
    ['I', '', ''],
  ]
  expect(table(rows, 100).join('\n')).toBe(
    ['  tube        kV  route', '  K         0.78  drawn', '  flourish  12.3  assumed', '  I'].join('\n'),
  )
})

test('names lose their middle where a table is too wide, the longest first', () => {
  const rows = [
    ['', 'from', 'to', 'gap'],
    ['1', 'window-left-upper @120', 'K @3', '6.0'],
  ]
  expect(table(rows, 36, [1, 2])).toEqual([
    '     from                  to    gap',
    '  1  window-lef…pper @120  K @3  6.0',
  ])
})

test('whatever the names, a table with narrow figures keeps to its width', () => {
  const name = fc.oneof(
    fc.string({ maxLength: 60 }),
    fc.constantFrom('ネオン管の名前がとても長い場合', 'Größe', 'x'.repeat(80)),
  )
  fc.assert(
    fc.property(fc.array(fc.tuple(name, name), { minLength: 1, maxLength: 5 }), (names) => {
      const rows = [['from', 'to', 'gap'], ...names.map(([a, b]) => [a, b, '12'])]
      for (const line of table(rows, 50, [0, 1])) expect(stringWidth(line)).toBeLessThanOrEqual(50)
    }),
  )
})

test('a name without its middle keeps both ends', () => {
  expect(withoutMiddle('left-window-7', 13)).toBe('left-window-7')
  expect(withoutMiddle('left-window-7', 8)).toBe('left…w-7')
})

test('a line of wide characters keeps to the width of the terminal', () => {
  const wide = '  ネオン管の名前 がとても 長い場合でも 右の端を 越えてはならない'
  for (const width of [12, 20, 31])
    for (const line of folded(wide, width)) expect(stringWidth(line), line).toBeLessThanOrEqual(width)
  expect(folded(wide, 20).join('').replaceAll(' ', '')).toBe(wide.replaceAll(' ', ''))
})

test('a long line goes on in deeper ones', () => {
  expect(folded('  lit  S1.1 and S1.2', 40)).toEqual(['  lit  S1.1 and S1.2'])
  expect(folded('  lit  S1.1 and S1.2 and S2.1', 16)).toEqual(['  lit  S1.1 and', '    S1.2 and', '    S2.1'])
})
