/** Against the plain way: every wiring by its full solution; and what must hold of every search. */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import type { Layout, Wiring } from '../../src/layout/layout.js'
import { scoreOf } from '../../src/rewire/rewire.js'
import { compareScores } from '../../src/rewire/score.js'
import type { Joint, RewireStep } from '../../src/rewire/steps.js'
import { wiringChange } from '../../src/wiring/edits.js'
import { layoutOf } from '../rules/signs.js'
import { rankOfBest } from './brute-force.js'
import { inspected, row, sought } from './signs.js'

const fileOf = (name: string): Layout => layoutOf(readFileSync(`layouts/${name}.yaml`, 'utf8'))
const joints = (wiring: Wiring): Set<string> =>
  new Set(wiringChange({ circuits: [] }, wiring).on.map((joint) => [...joint].sort().join(' ')))
const stringOf = (wiring: Wiring): string =>
  wiring.circuits
    .map(({ string }) => string.map((e) => (e.reversed ? '-' : '') + e.tube).join(' '))
    .join(' | ')

describe('against every wiring solved in full', () => {
  it.each([1, 2, 3, 4, 5, 6])('three tubes, sign %i: the first proposal is the best there is', (seed) => {
    expect(rankOfBest(row({ tubes: 3, seed }))).toBeLessThan(5)
  })

  it('four tubes, one end grounded', () => {
    expect(rankOfBest(row({ tubes: 4, seed: 9, grounding: 'one-end' }))).toBeLessThan(5)
  }, 60_000)

  it('three tubes under rules that go by the nameplate', () => {
    expect(rankOfBest(row({ tubes: 3, seed: 4, rules: 'common-practice, iec-60664-1' }))).toBeLessThan(5)
  })
})

describe('the example signs', () => {
  it('the pennant: as good as its variant, or better', () => {
    const layout = fileOf('feed-moved')
    const of = sought(layout)
    const variant = layout.variants[0]!
    const known = scoreOf(layout.wiring, variant, inspected(of, variant))
    const [first] = of.rewired.proposals
    expect(of.rewired).toMatchObject({ exact: true, method: 'enumeration', judged: 46_080, wirings: 46_080 })
    expect(known.fix).toBe(0)
    expect(first?.score.fix).toBe(0)
    expect(first && compareScores(first.score, known)).toBeLessThanOrEqual(0)
    expect(first?.score.changed).toBe(2)
  }, 30_000)

  it('the shop window: nothing to fix for two jumpers', () => {
    const { rewired } = sought(fileOf('open-window'))
    expect(rewired.before.score.fix).toBe(1)
    expect(rewired.proposals[0]?.score).toMatchObject({ unfit: 0, fix: 0, changed: 2 })
  }, 30_000)

  it('a sign that is right stays as it is', () => {
    const { rewired } = sought(fileOf('core-and-coil-6kv'))
    expect(rewired.proposals).toEqual([rewired.before])
    expect(rewired.before.steps).toEqual([{ kind: 'leave' }])
  }, 30_000)
})

describe('every proposal', () => {
  const layout = row({ tubes: 6, seed: 12 })
  const { rewired } = sought(layout)

  it('is lit, no worse than the one behind it, and better than the wiring of the file', () => {
    const { proposals, before } = rewired
    expect(proposals.length).toBeGreaterThan(1)
    for (const [k, { score, inspection }] of proposals.entries()) {
      expect(inspection.circuits.every(({ lit }) => lit)).toBe(true)
      expect(compareScores(score, before.score)).toBeLessThan(0)
      const next = proposals[k + 1]
      if (next) expect(compareScores(score, next.score)).toBeLessThanOrEqual(0)
    }
  })

  it('joins other tubes than any other proposal, and is not beaten in everything by one of them', () => {
    const tubesOnly = (wiring: Wiring) =>
      [...joints(wiring)]
        .filter((j) => !j.includes('S1.'))
        .sort()
        .join(', ')
    const { proposals } = rewired
    expect(new Set(proposals.map(({ wiring }) => tubesOnly(wiring))).size).toBe(proposals.length)
    for (const [k, { score }] of proposals.entries())
      for (const { score: earlier } of proposals.slice(0, k))
        expect(score.changed < earlier.changed || score.lead < earlier.lead).toBe(true)
  })

  it('has steps that lead from the wiring of the file to its own, all off before anything goes on', () => {
    for (const { wiring, steps } of rewired.proposals)
      expect(replayed(joints(layout.wiring), steps)).toEqual(joints(wiring))
  })
})

/** The joints after the steps: refuses what no bench worker could do. */
function replayed(start: ReadonlySet<string>, steps: readonly RewireStep[]): Set<string> {
  expect([steps[0]?.kind, steps.at(-2)?.kind, steps.at(-1)?.kind]).toEqual(['power-off', 'check', 'power-up'])
  const now = new Set(start)
  const held = (end: string) => [...now].some((joint) => joint.split(' ').includes(end))
  for (const step of steps) {
    if (step.kind === 'take-off') expect(now.delete([...step.joint].sort().join(' '))).toBe(true)
    if (step.kind === 'put-on') {
      for (const end of step.joint) expect(held(end)).toBe(false)
      now.add([...step.joint].sort().join(' '))
    }
    if (step.kind === 'feed')
      for (const [k, end] of step.ends.entries())
        expect(now.has([`${step.supply}.${k + 1}`, end].sort().join(' '))).toBe(true)
  }
  return now
}

describe('a search', () => {
  const nine = row({ tubes: 9, seed: 3 })

  it('says the same for the same seed', () => {
    const [one, two] = [sought(nine, { seed: 5 }), sought(nine, { seed: 5 })].map(({ rewired }) => rewired)
    expect(one?.judged).toBe(two?.judged)
    expect(one?.judged).toBeGreaterThanOrEqual(40_000)
    expect(one?.proposals.map((p) => stringOf(p.wiring))).toEqual(
      two?.proposals.map((p) => stringOf(p.wiring)),
    )
  }, 60_000)

  it('can be stopped at any time and still says what it found', () => {
    let asked = 0
    const { rewired } = sought(nine, { stopped: () => ++asked > 3 })
    expect(rewired).toMatchObject({ stopped: true, exact: false })
    expect(rewired.judged).toBeLessThan(2_000)
    expect(rewired.proposals.length).toBeGreaterThan(0)
  })

  it('keeps the joints that must stay', () => {
    const layout = row({ tubes: 5, seed: 2 })
    const free = sought(layout).rewired.proposals[0]!
    const taken = free.steps.flatMap((s) => (s.kind === 'take-off' && s.what === 'jumper' ? [s.joint] : []))
    expect(taken.length).toBeGreaterThan(0)
    const keep: Joint[] = [taken[0]!]
    const { rewired } = sought(layout, { keep })
    for (const { wiring } of rewired.proposals)
      expect(joints(wiring).has([...keep[0]!].sort().join(' '))).toBe(true)
    // what must stay can only make the best worse
    expect(compareScores(rewired.proposals[0]!.score, free.score)).toBeGreaterThanOrEqual(0)
    const all = wiringChange({ circuits: [] }, layout.wiring).on
    const bound = sought(layout, { keep: all }).rewired
    expect(bound).toMatchObject({ judged: 1, proposals: [bound.before] })
  }, 30_000)

  it('uses no feed lead that is longer than the supply allows', () => {
    const layout = row({ tubes: 4, seed: 5, supply: ', max_lead_mm: 420' })
    const { rewired } = sought(layout)
    expect(rewired.judged).toBeLessThan(384)
    for (const { wiring, inspection } of rewired.proposals)
      if (wiring !== layout.wiring)
        for (const { role, length } of inspection.circuits[0]!.leads)
          if (role === 'feed') expect(length).toBeLessThanOrEqual(0.42 + 1e-9)
  })

  it('shows nothing where nothing is lit', () => {
    const { rewired } = sought(row({ tubes: 3, kv: 0.05 }))
    expect(rewired.before.inspection.circuits[0]?.lit).toBe(false)
    expect(rewired.proposals).toEqual([])
  })
})
