import { expect, test } from 'vitest'
import { withOverlays } from '../../src/view/map-overlay.js'
import { marks, meanings } from '../../src/view/theme.js'
import { gridText, mapFrame, options, plainWindow, scene, tube } from './map-signs.js'

const posts = scene([
  tube('A', [
    [35, 30],
    [35, 110],
  ]),
  tube('B', [
    [165, 30],
    [165, 110],
  ]),
])
const window = plainWindow(20, 7)
const grid = mapFrame(posts, () => 0, window, options({ labels: true }))
const look = (shown: typeof grid, column: number, row: number) => {
  const cell = row * 20 + column
  return [shown.glyphs[cell], meanings[shown.meanings[cell]!], shown.marks[cell]]
}

test('a pair is two inverse places and a dashed line between them, a probe has a character of its own', () => {
  const shown = withOverlays(grid, window, {
    pair: [
      { x: 0.035, y: 0.05 },
      { x: 0.165, y: 0.09 },
    ],
    probe: { x: 0.165, y: 0.1 },
  })
  expect(gridText(shown).map((row) => row.trimEnd())).toEqual([
    '',
    '  A[           B[',
    '   │x x         │',
    '   │   x x x x  │',
    '   │          x │',
    '   ]            @',
    '',
  ])
  expect(look(shown, 3, 2)).toEqual(['│', 'pair', marks.inverse])
  expect(look(shown, 16, 4)).toEqual(['│', 'pair', marks.inverse])
  expect(look(shown, 4, 2)).toEqual(['x', 'pair', 0])
  expect(look(shown, 16, 5)[1]).toBe('probe')
})

test('the cursor shows what it stands on, inverse', () => {
  const cursor = { column: 3, row: 3 }
  expect(look(withOverlays(grid, window, { cursor }), 3, 3)).toEqual(['│', 'about-0', marks.inverse])
  expect(look(withOverlays(grid, window, { cursor: { column: 0, row: 0 } }), 0, 0)).toEqual([
    ' ',
    'blank',
    marks.inverse,
  ])
})

test('overlays leave the grid below as it was, and nothing happens outside the window', () => {
  const before = structuredClone(grid)
  const shown = withOverlays(grid, window, {
    cursor: { column: 20, row: 3 },
    pair: [
      { x: -5, y: 9 },
      { x: -6, y: 9 },
    ],
    probe: { x: 9, y: 9 },
  })
  expect(grid).toEqual(before)
  expect(shown).toEqual(before)
})
