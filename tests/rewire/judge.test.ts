/** The cheap judge against the full solution, and the laws that the bounds of the search stand on. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { prepare, solver } from '../../src/inspection.js'
import { branches, wiringCount } from '../../src/rewire/branches.js'
import { moveCount, moved } from '../../src/rewire/descent.js'
import { cheapJudge } from '../../src/rewire/judge.js'
import { type Model, searchModel, wiringOf } from '../../src/rewire/model.js'
import { candidatePool, type Pool, proven } from '../../src/rewire/pool.js'
import { scoreOf } from '../../src/rewire/rewire.js'
import { compareScores, type Score } from '../../src/rewire/score.js'
import { resolveRules } from '../../src/rules/resolve.js'
import { inspected, type Row, row } from './signs.js'

const tubes = 5

function modelOf(of: Row) {
  const layout = row(of)
  const prepared = prepare(layout, resolveRules(layout.rules))
  const sign = { layout, prepared, solve: solver(prepared) }
  const model = searchModel(prepared, sign.solve(layout.wiring), inspected(sign, layout.wiring), { keep: [] })
  return { ...sign, model }
}
const sign = modelOf({ tubes, seed: 7 })

const someString = fc
  .tuple(
    fc.shuffledSubarray(
      Array.from({ length: tubes }, (_, t) => t),
      { minLength: tubes },
    ),
    fc.array(fc.boolean(), { minLength: tubes, maxLength: tubes }),
  )
  .map(([order, turns]) => order.map((t, k) => 2 * t + (turns[k] ? 1 : 0)))

const kept = (score: Score): Score => ({ ...score, severities: Float64Array.from(score.severities) })

describe('the cheap judge', () => {
  it('knows leads and jumpers exactly, pairs to fix within the edge, severities within a twentieth', () => {
    const { model, layout } = sign
    const judge = cheapJudge(model)
    fc.assert(
      fc.property(someString, (codes) => {
        judge.restart()
        for (const code of codes) judge.place(code)
        const cheap = judge.score()
        const wiring = wiringOf(layout.wiring, model.tubeIds, [codes])
        const found = inspected(sign, wiring)
        const full = scoreOf(layout.wiring, wiring, found)
        expect(cheap.changed).toBe(full.changed)
        expect(cheap.lead).toBeCloseTo(full.lead, 9)
        // one place of a run for all of it, and drops that stray current moves by a few percent
        for (let k = 0; k < 4; k++) {
          const [a, b] = [cheap.severities[k]!, full.severities[k] ?? 0]
          if (b > 0.1 && b < 900) expect(Math.abs(a - b)).toBeLessThan(0.05 * b + 0.01)
        }
        const edge = found.pairs.filter(({ severity }) => Math.abs(severity - 1) < 0.05).length
        expect(Math.abs(cheap.fix - full.fix)).toBeLessThanOrEqual(edge + 1)
      }),
      { numRuns: 40, seed: 11 },
    )
  })

  it('only ever gets worse by placing, and is back where it was by taking back', () => {
    const judge = cheapJudge(sign.model)
    fc.assert(
      fc.property(someString, someString, (codes, others) => {
        judge.restart()
        const before: Score[] = []
        for (const code of codes) {
          before.push(kept(judge.score()))
          // a detour that is taken back leaves no trace
          const detour = others.find(
            (other) => !codes.slice(0, before.length - 1).some((c) => c >> 1 === other >> 1),
          )
          if (detour !== undefined) {
            judge.place(detour)
            judge.takeBack()
          }
          judge.place(code)
          expect(compareScores(judge.score(), before.at(-1)!)).toBeGreaterThanOrEqual(0)
        }
        const whole = kept(judge.score())
        judge.restart()
        for (const code of codes) judge.place(code)
        expect(judge.score()).toEqual(whole)
        for (const score of before.reverse()) {
          judge.takeBack()
          expect(judge.score()).toEqual(score)
        }
      }),
      { seed: 3 },
    )
  })
})

const run = (model: Model, bound: boolean): { pool: Pool; judged: number } => {
  const pool = candidatePool()
  const going = branches(model, cheapJudge(model), pool, { bound, mostNodes: 1e7 })
  for (let step = going.next(); ; step = going.next())
    if (step.done === true) return { pool, judged: step.value.judged }
}

describe('branch and bound', () => {
  it('finds the same best ones as scoring every wiring, and scores fewer', () => {
    const { model } = sign
    const [all, bounded] = [run(model, false), run(model, true)]
    expect(all.judged).toBe(wiringCount(model))
    expect(bounded.judged).toBeLessThan(all.judged)
    const list = ({ pool }: { pool: Pool }) =>
      pool
        .candidates()
        .slice(0, proven)
        .map(({ score }) => score)
    expect(list(bounded)).toEqual(list(all))
  })
})

describe('the moves of the descent', () => {
  it('keep the tubes and lead from any string to any other', () => {
    const start = [0, 2, 4, 6]
    const reached = new Map([[start.join(' '), start]])
    for (const string of reached.values())
      for (let move = 0; move < moveCount(start.length); move++) {
        const next = [...moved(string, move)]
        reached.set(next.join(' '), next)
      }
    expect(reached.size).toBe(384)
    const tubesOf = (string: readonly number[]) => [...string].map((code) => code >> 1).sort((a, b) => a - b)
    expect(new Set([...reached.values()].map((string) => tubesOf(string).join(' ')))).toEqual(
      new Set(['0 1 2 3']),
    )
  })
})
