/** The search for better wiring: what judging one wiring costs, and how long a whole answer takes. In process, warm. */
import { inspection, prepare, solver } from '../../src/inspection.js'
import type { Layout } from '../../src/layout/layout.js'
import { moveCount, moved } from '../../src/rewire/descent.js'
import { cheapJudge } from '../../src/rewire/judge.js'
import { codesOf, searchModel } from '../../src/rewire/model.js'
import { type Rewired, rewire } from '../../src/rewire/rewire.js'
import { rowText } from '../rewire/row-text.js'
import { parsed } from './sign.js'
import { row, timeRow } from './table.js'
import { median, seeded, timed } from './timing.js'

const sizes = [4, 6, 8, 12, 20, 30]
const wirings = 400

const signOf = (tubes: number, seed = 3): Layout => parsed(rowText({ tubes, seed }), 'row.yaml')

export function rewireRows(): void {
  for (const tubes of sizes) judgedRow(tubes)
  for (const tubes of [6, 8, 12]) {
    const times = timed(0, 3, (run) => answer(signOf(tubes, run + 1)).proposals[0]?.score.severities[0] ?? 0)
    timeRow(
      `rewire, ${tubes} tubes: the whole answer`,
      times,
      tubes === 8 ? 3000 : tubes === 12 ? 5000 : undefined,
    )
  }
}

/** Complete wirings one after the other, none left early; all leads and crossings that they need are known. */
function judgedRow(tubes: number): void {
  const layout = signOf(tubes)
  const prepared = prepare(layout)
  const solved = solver(prepared)(layout.wiring)
  const found = inspection(prepared, layout.wiring, solved)
  const model = searchModel(prepared, solved, found, { keep: [] })
  const judge = cheapJudge(model)
  const random = seeded(1)
  const strings: (readonly number[])[] = [codesOf(layout.wiring, model.tubeIds)[0]!]
  while (strings.length < wirings)
    strings.push(moved(strings.at(-1)!, Math.floor(random() * moveCount(tubes))))
  const times = timed(3, 9, () =>
    strings.reduce((sum, string) => {
      judge.restart()
      for (const code of string) judge.place(code)
      return sum + judge.score().lead
    }, 0),
  )
  const each = (1000 * median(times)) / wirings
  row(
    `one wiring of ${tubes} tubes, judged whole`,
    `${each.toFixed(1)} µs, ${((1000 * each) / tubes ** 2).toFixed(0)} ns a tube²`,
  )
}

export function answer(layout: Layout): Rewired {
  const prepared = prepare(layout)
  const search = rewire(prepared, solver(prepared))
  for (let step = search.next(); ; step = search.next()) if (step.done === true) return step.value
}
