import { expect, test } from 'vitest'
import { mapFrame } from '../../src/view/map.js'
import { gridRuns, gridText, styledRows } from '../../src/view/map-runs.js'
import { marks } from '../../src/view/theme.js'
import { letterO, options, plainWindow } from './map-signs.js'

const column = letterO.bodies[0]!.line.length
const alongO = (body: number, at: number) => [-5000 + (10000 * at) / column, 5000, -5000, 0][body]

test('the runs of a row spell the row, and an empty cell starts no run of its own', () => {
  const grid = mapFrame(letterO, alongO, plainWindow(26, 14), options({ labels: true }))
  gridText(grid).forEach((row, k) => {
    const runs = gridRuns(grid, k)
    expect(runs.map((run) => run.text).join('')).toBe(row)
    expect(runs.slice(1).every((run) => run.text.trim() !== '')).toBe(true)
  })
  expect(gridRuns(grid, 1).map((run) => [run.text, run.meaning, run.marks])).toEqual([
    ['     ', 'blank', 0],
    ['╭──', 'plus-3', 0],
    [']   ', 'plus-3', marks.bold],
    ['[', 'minus-3', marks.bold],
    ['──╮      ', 'minus-3', 0],
    ['╎   ', 'plus-3', 0],
  ])
  expect(styledRows(grid, { level: 0, ground: 'dark' })[12]).toBe(gridText(grid)[12])
})
