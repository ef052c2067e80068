/** Derivations and symptoms in a terminal: the worker tells what laying the leads otherwise gives back. */
import { afterEach, expect, test, vi } from 'vitest'
import { shippedProgram, solvedScreen } from './inspector-program.js'
import { closeTerminals, keys } from './terminal.js'

const program = shippedProgram()
afterEach(closeTerminals)
// starts and solutions, on whatever machine
vi.setConfig({ testTimeout: 60_000 })

test('why scrolls, a symptom is picked, and the gains of its leads come from the worker', async () => {
  const terminal = await solvedScreen(program, 'layouts/conversion-gone-wrong.yaml', {
    columns: 110,
    rows: 70,
  })
  const shows = (wanted: RegExp) =>
    terminal.until(() => wanted.test(terminal.dump()), `never showed ${wanted}`)

  terminal.send('y')
  await shows(/Why I at 0\.0 mm to I at 911 mm: gap 6\.0 mm/)
  await shows(/S1\.1 stands at \d\.\d\d kV to ground/)
  // the map is not drawn over the sheet, the two rows of cautions stay
  expect(terminal.dump()).toContain('HIGH VOLTAGE KILLS')
  terminal.send('x')
  await shows(/Tab next/)

  terminal.send('Y')
  await shows(/> hum/)
  for (let i = 0; i < 5; i++) terminal.send(keys.down)
  await shows(/> tripping/)
  terminal.send(keys.enter)
  await shows(/Symptom: tripping/)
  await shows(/S1\.1–G\.a cut to the straight 694 mm: it eats less by \d\.\d mA/)
  expect(terminal.dump()).not.toContain('internal error')
})
