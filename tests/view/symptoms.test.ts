/** Symptoms point at figures of the very sign. */
import { readFileSync } from 'node:fs'
import { describe, expect, test, vi } from 'vitest'
import { type Inspection, inspection, prepare, solver } from '../../src/inspection.js'
import type { Layout } from '../../src/layout/layout.js'
import { type Explanation, explanationRows } from '../../src/view/explanation.js'
import { symptomNamed, symptomSheet, symptoms } from '../../src/view/symptoms.js'
import { twoBars } from '../report/signs.js'
import { layoutOf } from '../rules/signs.js'

// a machine that does other things at the same time is slow
vi.setConfig({ testTimeout: 30_000 })

function solved(layout: Layout): { layout: Layout; inspection: Inspection } {
  const prepared = prepare(layout)
  return { layout, inspection: inspection(prepared, layout.wiring, solver(prepared)(layout.wiring)) }
}
const shipped = (name: string) => solved(layoutOf(readFileSync(`layouts/${name}.yaml`, 'utf8')))
const part = ({ parts }: Explanation, title: string): readonly string[] => {
  const found = parts.find((p) => p.title === title)
  if (!found) throw new Error(`no part ${title}; there are ${parts.map((p) => p.title).join(', ')}`)
  return found.lines
}

test('a symptom is known by its name, with blanks or hyphens', () => {
  for (const { symptom, name } of symptoms)
    for (const text of [symptom, name, ` ${name.toUpperCase()} `]) expect(symptomNamed(text)).toBe(symptom)
  expect(symptomNamed('smoke')).toBeUndefined()
})

const signs = {
  'conversion-gone-wrong': shipped('conversion-gone-wrong'),
  'reference-12-tubes': shipped('reference-12-tubes'),
  'a sign that is dark': solved(layoutOf(twoBars({ noLoadKv: 1 }))),
}

describe.each(Object.entries(signs))('%s', (_, sign) => {
  test.each(symptoms)(
    '$name: figures, facts of the trade marked as such, and what cannot be seen',
    ({ symptom }) => {
      const sheet = symptomSheet(sign, symptom)
      const rows = explanationRows(sheet, 80).map(({ text }) => text)
      expect(rows.join('\n')).not.toMatch(/NaN|undefined|Infinity/)
      expect(Math.max(...rows.map((row) => row.length))).toBeLessThanOrEqual(80)
      const titles = sheet.parts.map(({ title }) => title)
      expect(titles.slice(-2)).toEqual([
        'Common practice, no published source',
        'What this program cannot see',
      ])
      expect(sheet.parts.every(({ lines }) => lines.length > 0)).toBe(true)
      // at least one figure of this sign
      expect(sheet.parts.slice(0, -2).some(({ lines }) => /\d/.test(lines.join()))).toBe(true)
    },
  )

  test('ozone: the gaps in the order of what they have of their start, by their numbers in the list', () => {
    const { pairs } = sign.inspection
    const [head = '', ...lines] = part(symptomSheet(sign, 'ozone'), 'Gaps nearest to a discharge')
    const margins = pairs.map(({ air }) => air.peak / air.startsAt)
    const listed = lines.map((line) => margins[Number(/^pair (\d+),/.exec(line)?.[1]) - 1] ?? Number.NaN)
    expect(listed).toEqual([...margins].sort((a, b) => b - a).slice(0, 5))
    expect(head).toContain(`${margins.filter((m) => m >= 1).length} of ${pairs.length} pairs`)
  })
})

test('dim far tube: the least current first', () => {
  const sign = signs['conversion-gone-wrong']
  const [circuit] = sign.inspection.circuits
  const dimmest = [...(circuit?.tubes ?? [])].sort(
    (a, b) => (a.least?.current ?? 0) - (b.least?.current ?? 0),
  )[0]
  const [head, first] = part(symptomSheet(sign, 'dim-far-tube'), 'Current along the string')
  expect(head).toMatch(/^S1 gives 30\.0 mA/)
  expect(first).toMatch(
    new RegExp(
      `^${dimmest?.id}: ${((dimmest?.least?.current ?? 0) * 1000).toFixed(1)} mA at its dimmest place`,
    ),
  )
})

test('tripping: the parts as printed make up the residual as printed', () => {
  const sign = signs['conversion-gone-wrong']
  const [head = '', made = ''] = part(symptomSheet(sign, 'tripping'), 'Current back through ground')
  const residual = Number(/gets (\d+\.\d) mA back/.exec(head)?.[1])
  const shares = [...made.matchAll(/ ([+-]\d+\.\d)(?=[,.])/g)].map(([, share]) => Number(share))
  expect(shares.length).toBeGreaterThan(3)
  const sum = shares.reduce((total, share) => total + share, 0)
  // each is rounded to 0.05 mA
  expect(Math.abs(sum - residual)).toBeLessThanOrEqual(0.05 * (shares.length + 1))
  // the largest first, whatever its sign
  const sizes = shares.slice(0, 5).map(Math.abs)
  expect(sizes).toEqual([...sizes].sort((a, b) => b - a))
})

test('tripping: what laying the leads otherwise gives back stands there once it is known', () => {
  const sign = signs['conversion-gone-wrong']
  const saving = {
    circuit: 0,
    between: ['S1.1', 'G.a'] as const,
    cut: { length: 0.694, stray: 0.0041, least: 0.0026, residual: -0.004 },
    lift: { by: 0.0205, stray: 0.002, least: 0.001, residual: 0.0005 },
  }
  const lines = part(symptomSheet(sign, 'tripping', [saving]), 'Leads')
  expect(lines).toContain(
    'S1.1–G.a cut to the straight 694 mm: it eats less by 4.1 mA, the dimmest tube gets 2.6 mA more, the residual is more by 4.0 mA.',
  )
  expect(lines).toContain(
    'S1.1–G.a lifted 21 mm, to 25 mm off the metal: it eats less by 2.0 mA, the dimmest tube gets 1.0 mA more, the residual is less by 0.5 mA.',
  )
  expect(part(symptomSheet(sign, 'tripping'), 'Leads').join()).not.toContain('cut to')
})

test('leads: half of the no-load voltage stands on any of them when a tube opens', () => {
  // midpoint grounded, 7.5 kV no-load: 3.75 kV rms to ground, times √2
  const lines = part(symptomSheet(signs['conversion-gone-wrong'], 'tripping'), 'Leads')
  expect(lines.at(-1)).toContain('With a tube open any lead of S1 may stand at 5.3 kV peak to ground')
})

test('dark tube: why it is dark, and which goes first', () => {
  const lines = part(symptomSheet(signs['a sign that is dark'], 'dark-tube'), 'Does the string light?')
  expect(lines.join()).toMatch(/S1 cannot light its whole string.* goes dark first/)
})
