import { describe, expect, test } from 'vitest'
import { type Inspection, inspection, prepare, solver } from '../../src/inspection.js'
import type { Caution } from '../../src/rules/findings.js'
import { resolveRules } from '../../src/rules/resolve.js'
import { onPaper, shopText, type TwoTubes, twoTubes } from './signs.js'

const litSign = (sign: TwoTubes, rules: readonly string[] = ['common-practice']): Inspection => {
  const prepared = prepare(twoTubes(sign), resolveRules(rules))
  return inspection(prepared, prepared.layout.wiring, solver(prepared)(prepared.layout.wiring))
}
const find = <Code extends Caution['code']>({ cautions }: Inspection, code: Code) =>
  cautions.find((c): c is Extract<Caution, { code: Code }> => c.code === code)
const codes = ({ cautions }: Inspection) => cautions.map((c) => c.code)

test('the most pressing come first', () => {
  const order = ['danger', 'fix', 'watch', 'note']
  const found = onPaper(
    twoTubes({
      gap: 10,
      kv: 10,
      hertz: 60_000,
      more: 'metal: [{id: back, plate: [[0, 0], [100, 100]], height: 0, grounded: true}]',
    }),
    ['common-practice', 'gone.yaml', 'nec-600'],
  )
  const levels = found.cautions.map((c) => order.indexOf(c.level))
  expect(levels).toEqual([...levels].sort())
  expect(codes(found)).toEqual(
    expect.arrayContaining(['pairs', 'rules-missing', 'rule', 'lower-voltage', 'frequency']),
  )
})

describe('pairs', () => {
  test('one entry with the worst pair and how many more there are', () => {
    const found = onPaper(
      twoTubes({ gap: 10, boots: false }),
      ['common-practice', 'nec-600', 'iec-60664-1', 'shop.yaml'],
      shopText('- {clause: a, between: [tube], and: [lead], distance_mm: 60}'),
    )
    const count = (verdict: string) => found.pairs.filter((p) => p.verdict === verdict).length
    expect(count('fix')).toBeGreaterThan(1)
    expect(codes(found).filter((code) => code === 'pairs')).toHaveLength(1)
    expect(find(found, 'pairs')).toMatchObject({ level: 'fix', fix: count('fix') - 1, watch: count('watch') })
    expect(find(found, 'pairs')?.pair).toBe(found.pairs[0])
    expect(found.cautions[0]?.code).toBe('pairs')
  })
  test('a pair to watch is a watch; nothing is said of pairs within', () => {
    // 12.5 mm may have 1.5 kV by the thumb
    const at = (gap: number) =>
      find(onPaper(twoTubes({ gap, kv: 1.3, type: 'core-and-coil', hertz: 50 })), 'pairs')
    expect(at(12.5)).toMatchObject({ level: 'watch', fix: 0, watch: 0 })
    expect(at(40)).toBeUndefined()
  })
  test('dark circuits come before it', () => {
    const found = litSign({ gap: 10, kv: 1 })
    expect(codes(found).slice(0, 2)).toEqual(['dark', 'pairs'])
  })
})

test('what may go dark says by how much: the band of its own law', () => {
  const prepared = prepare(twoTubes())
  const { wiring } = prepared.layout
  const solved = { ...solver(prepared)(wiring), mayGoDark: ['S1'] }
  const band = (more: Partial<typeof solved>) =>
    find(inspection(prepared, wiring, { ...solved, ...more }), 'may-go-dark')?.band
  expect(band({})).toBe(0.3)
  expect(band({ measured: [{ factor: 1.1, currents: [], from: 'watts' }] })).toBeCloseTo(0.05, 12)
  expect(band({ measured: [{ currents: [], from: 'nothing' }] })).toBe(0.3)
})

test('a dark circuit names its supply, why, and the tubes in the order in which they go dark', () => {
  const found = litSign({ kv: 1 })
  const [circuit] = found.circuits
  expect(find(found, 'dark')).toMatchObject({
    level: 'fix',
    supply: 'S1',
    why: 'needs-more-than-no-load',
    neededVoltage: circuit?.neededVoltage,
    noLoadVoltage: 1000,
    dark: circuit?.dark,
  })
  expect(circuit?.dark.length).toBeGreaterThan(0)
})

describe('stray', () => {
  // 2 m of glass 2 mm off a grounded face: stray current leaves all the way to the middle of the string
  const close = (height: number, hertz = 60_000): TwoTubes => ({
    face: 'grounded',
    height,
    kv: 12,
    hertz,
    string: '[A, B]',
  })
  test('says how much current is left at the dimmest place, when that is under 0.85 of the short-circuit current', () => {
    const found = litSign(close(8))
    const [circuit] = found.circuits
    const least = Math.min(...(circuit?.tubes ?? []).map((t) => t.least?.current ?? Infinity))
    expect(least).toBeLessThan(0.85 * 0.03)
    const stray = find(found, 'stray')
    expect(stray).toMatchObject({
      level: 'watch',
      supply: 'S1',
      least,
      given: expect.closeTo(0.03, 12),
      onMetal: true,
    })
    expect(circuit?.tubes.find((t) => t.id === stray?.tube)?.least?.current).toBe(least)
  })
  test('is silent where more is left', () => {
    const found = litSign(close(8, 40_000))
    const [circuit] = found.circuits
    expect(circuit?.lit).toBe(true)
    const share = Math.min(...(circuit?.tubes ?? []).map((t) => t.least?.current ?? 0)) / 0.03
    expect(share).toBeGreaterThan(0.85)
    expect(share).toBeLessThan(0.92)
    expect(find(found, 'stray')).toBeUndefined()
  })
  test('is silent about a transformer, whose current falls with its load', () => {
    expect(find(litSign({ type: 'core-and-coil', hertz: 50, kv: 3 }), 'stray')).toBeUndefined()
  })
})

describe('one caution for one quantity', () => {
  const transformer = (metres: number, rules: readonly string[]) =>
    onPaper(
      twoTubes({ type: 'core-and-coil', hertz: 50, supply: `chart_m: {argon-mercury-12: ${metres}}` }),
      rules,
    )
  const loads = (found: Inspection) => codes(found).filter((code) => code === 'loading' || code === 'rule')
  test('92 % of the chart: the rule says it, with its set and clause', () => {
    const found = transformer(2.6 / 0.92, ['common-practice'])
    expect(loads(found)).toEqual(['rule'])
    expect(find(found, 'rule')?.finding).toMatchObject({
      set: 'common-practice',
      clause: 'footage',
      verdict: 'watch',
    })
  })
  test('over the chart: the maker says it', () => {
    expect(loads(transformer(2.6 / 1.2, ['common-practice']))).toEqual(['loading'])
  })
  test('92 % without common practice: nothing', () => {
    expect(loads(transformer(2.6 / 0.92, ['gb-50303']))).toEqual([])
  })
})

test('metal conduit names the leads and the rule', () => {
  const found = onPaper(
    twoTubes({
      leads: '- {between: [S1.1, A.a], path: [[500, 900, 300], [1000, 1000, 300]], conduit: metal, bore: 16}',
    }),
  )
  expect(find(found, 'conduit')).toEqual({
    level: 'fix',
    code: 'conduit',
    supply: 'S1',
    leads: ['S1.1–A.a'],
    governs: 'common-practice: no metal conduit',
  })
})

test('glass that meets in the drawing asks which is in front', () => {
  expect(find(onPaper(twoTubes({ gap: 0 })), 'glass-meets')).toMatchObject({
    level: 'fix',
    tubes: [['A', 'B']],
  })
})

test('a route that is ours is said where it passes glass or metal', () => {
  const found = onPaper(twoTubes({ gap: 20 }))
  expect(find(found, 'route-assumed')?.leads).toContain('S1.1–A.a')
})

describe('parts drawn into each other', () => {
  const wall = (id: string) =>
    `{id: ${id}, wall: [[1000, 1300], [2000, 1300]], from: 250, to: 350, grounded: true}`
  test('are named, since capacitances there are rough', () => {
    const found = litSign({ more: `metal: [${wall('one')}, ${wall('same')}]` })
    expect(find(found, 'strained')).toMatchObject({ level: 'watch', parts: expect.arrayContaining(['same']) })
  })
  test('plates and walls that stand clear need no caution of their own', () => {
    const found = litSign({ more: `metal: [${wall('one')}]` })
    expect(find(found, 'strained')).toBeUndefined()
  })
})
