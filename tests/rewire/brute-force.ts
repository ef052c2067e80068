import { expect } from 'vitest'
import type { Layout, Wiring } from '../../src/layout/layout.js'
import { cheapJudge } from '../../src/rewire/judge.js'
import { codesOf, searchModel } from '../../src/rewire/model.js'
import { scoreOf } from '../../src/rewire/rewire.js'
import { compareScores, type Score } from '../../src/rewire/score.js'
import { everyWiring, inspected, type Sought, sought } from './signs.js'

interface Judged {
  readonly wiring: Wiring
  readonly full: Score
  readonly cheap: Score
}

/** Every wiring by the full solution (what is lit of them), beside what the cheap judge says. */
function everyJudged(layout: Layout, of: Sought): Judged[] {
  const { prepared, solve } = of
  const base = layout.wiring
  const model = searchModel(prepared, solve(base), inspected(of, base), { keep: [] })
  const judge = cheapJudge(model)
  return everyWiring(base).flatMap((wiring) => {
    const found = inspected(of, wiring)
    if (!found.circuits.every(({ lit }) => lit)) return []
    judge.restart()
    for (const code of codesOf(wiring, model.tubeIds).flat()) judge.place(code)
    const cheap = judge.score()
    const kept = { ...cheap, severities: Float64Array.from(cheap.severities) }
    return [{ wiring, full: scoreOf(base, wiring, found), cheap: kept }]
  })
}

/** The rank (from 0 on) that the cheap judge gives to a wiring that is the best by the full solution. */
export function rankOfBest(layout: Layout): number {
  const of = sought(layout)
  const all = everyJudged(layout, of)
  const best = all.map(({ full }) => full).reduce((a, b) => (compareScores(b, a) < 0 ? b : a))
  const first = of.rewired.proposals[0]
  expect(of.rewired.exact).toBe(true)
  expect(first).toBeDefined()
  // no wiring whatever is better than the first proposal
  if (first) expect(compareScores(first.score, best)).toBe(0)
  const ranked = [...all].sort((a, b) => compareScores(a.cheap, b.cheap))
  return ranked.findIndex(({ full }) => compareScores(full, best) === 0)
}
