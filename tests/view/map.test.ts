import { expect, test } from 'vitest'
import { defaultGlyphs, type MapGrid, mapGrid } from '../../src/view/map.js'
import { mapRaster } from '../../src/view/map-raster.js'
import { columnAt, rowAt } from '../../src/view/map-window.js'
import { marks, meaningIndex, meanings } from '../../src/view/theme.js'
import {
  arc,
  bar,
  gridText,
  lead,
  letterO,
  mapFrame,
  options,
  plainWindow,
  scene,
  terminals,
  tube,
} from './map-signs.js'

const text = (grid: MapGrid) => gridText(grid).map((row) => row.trimEnd())
const column = letterO.bodies[0]!.line.length
/** the O falls from -5 kV at its end a to +5 kV at its end b */
const alongO = (body: number, at: number) => [-5000 + (10000 * at) / column, 5000, -5000, 0][body]

test('a letter in box drawing: round glass, dashed leads with the feed heavy, a double bar', () => {
  const grid = mapFrame(letterO, alongO, plainWindow(26, 14), options({ labels: true }))
  expect(text(grid)).toEqual([
    '        ┌╌╌╌╌╌╌╌╌╌╌╌╌╌┐',
    '     ╭──]   [──╮      ╎',
    '    ╭╯      ╏ O╰╮     ╎',
    '   ╱        ╏    ╲    ╎',
    '  ╱         ╏     ╲   ╎',
    '  │         ╏     │   ╎',
    '  ╲         ╏     ╱   ╎',
    '   ╲        ╏    ╱    ╎',
    '    ╰╮      ╏  ╭╯     ╎',
    '     ╰──────╏──╯      ╎',
    '            ╏         ╎',
    '            ┗╍╍╍╍1    2 S1',
    ' ═══════════════════════',
    '',
  ])
})

test('the same letter in ASCII', () => {
  const grid = mapFrame(letterO, alongO, plainWindow(26, 14), options({ charset: 'ascii', labels: true }))
  expect(text(grid)).toEqual([
    '        :::::::::::::::',
    '     .--]   [--.      :',
    "    .'      ! O'.     :",
    '   /        !    \\    :',
    '  /         !     \\   :',
    '  |         !     |   :',
    '  \\         !     /   :',
    '   \\        !    /    :',
    "    '.      !  .'     :",
    "     '------!--'      :",
    '            !         :',
    '            !!!!!1    2 S1',
    ' %%%%%%%%%%%%%%%%%%%%%%%',
    '',
  ])
})

test('the same letter by steps of potential: glass in every cell, leads in every fourth', () => {
  const grid = mapFrame(
    letterO,
    alongO,
    plainWindow(26, 14),
    options({ charset: 'ascii', glyphs: 'level', labels: true }),
  )
  expect(text(grid)).toEqual([
    '        :#:::#:::#:::#:',
    '     ###]   [===      :',
    '    ##      = O==     :',
    '   *        !    ~    #',
    '  *         !     ~   :',
    '  *         !     ~   :',
    '  *         =     ~   :',
    '   +        !    -    #',
    '    ++      !  --     :',
    '     ++++ooo!---      :',
    '            =         :',
    '            !!!=!1    2 S1',
    ' %%%%%%%%%%%%%%%%%%%%%%%',
    '',
  ])
})

const script = scene([tube('e', [[5, 190], [60, 190], ...arc(110, 100, 60, 70, 60, -250), [215, 190]])])

test('a loop of script that crosses itself, in both character sets', () => {
  const frame = (charset: 'box' | 'ascii') =>
    text(mapFrame(script, () => 1000, plainWindow(24, 11), options({ charset })))
  expect(frame('box')).toEqual([
    '',
    '       ╭──────╮',
    '      ╱        ╲',
    '     ╱          ╲',
    '     │          │',
    '     │          │',
    '     ╲          ╱',
    '      ╲        ╱',
    '       ╰╭─────╯─╮',
    '[───────╯       ╰────]',
    '',
  ])
  expect(frame('ascii')).toEqual([
    '',
    '       .------.',
    '      /        \\',
    '     /          \\',
    '     |          |',
    '     |          |',
    '     \\          /',
    '      \\        /',
    "       '.-----'-.",
    "[-------'       '----]",
    '',
  ])
})

test('a round end that just reaches into the next column stays one stroke', () => {
  const bent = scene([tube('T', [[15, 30], [95, 30], ...arc(95, 50, 16, 20, -90, 90), [15, 70]])])
  expect(text(mapFrame(bent, () => 0, plainWindow(13, 5), options()))).toEqual([
    '',
    ' [────────╮',
    '          │',
    ' ]────────╯',
    '',
  ])
})

const crossing = scene([
  tube(
    'A',
    [
      [5, 50],
      [195, 50],
    ],
    40,
  ),
  tube(
    'B',
    [
      [95, 5],
      [95, 95],
    ],
    60,
  ),
])
const meeting = 2 * 20 + 9
const shownAtMeeting = (va: number, vb: number, pick?: number, mirrored = false) => {
  const window = { ...plainWindow(20, 5), mirrored }
  const cell = mirrored ? 2 * 20 + 10 : meeting
  const picked = pick === undefined ? {} : { picked: { cell, body: pick, at: 0 } }
  const grid = mapFrame(crossing, (body) => (body === 0 ? va : vb), window, options(picked))
  return { body: grid.owner[cell], marks: grid.marks[cell], meaning: meanings[grid.meanings[cell]!] }
}

test('of two conductors in a cell the one further from 0 V is shown, underlined, and of those picked the picked one', () => {
  expect(shownAtMeeting(-5000, 1000)).toEqual({ body: 0, marks: marks.underline, meaning: 'minus-3' })
  expect(shownAtMeeting(1000, -5000)).toEqual({ body: 1, marks: marks.underline, meaning: 'minus-3' })
  expect(shownAtMeeting(-5000, 1000, 1).body).toBe(1)
  expect(shownAtMeeting(1000, -5000, 0).body).toBe(0)
  // what does not pass through the cell cannot be shown there
  expect(shownAtMeeting(-5000, 1000, 7).body).toBe(0)
})

test('of two conductors on one step the nearer is shown: the higher from the front, the lower from the back', () => {
  expect(shownAtMeeting(5100, 5000).body).toBe(1)
  expect(shownAtMeeting(5100, 5000, undefined, true).body).toBe(0)
})

test('a cell of a single conductor is not underlined, nor is an electrode for the lead that arrives there', () => {
  const grid = mapFrame(letterO, alongO, plainWindow(26, 14), options())
  expect(grid.glyphs[1 * 26 + 8]).toBe(']')
  expect(grid.marks[1 * 26 + 8]).toBe(marks.bold)
  expect(grid.marks[5 * 26 + 2]).toBe(0)
  // the feed passes behind the foot of the letter
  expect(grid.marks[9 * 26 + 12]).toBe(marks.underline)
})

test('two strands of one tube in a cell are told apart, a bend is not', () => {
  const doubled = scene([
    tube('E', [
      [15, 30],
      [195, 30],
      [195, 35],
      [15, 35],
    ]),
  ])
  const grid = mapFrame(doubled, (_, at) => 5000 - 20000 * at, plainWindow(21, 3), options())
  expect(grid.marks[21 + 10]).toBe(marks.underline)
  expect(grid.marks[21 + 19]).toBe(0)
  // near the ends the strands are 360 mm apart along the path: +5 kV here, -2.4 kV there
  expect(meanings[grid.meanings[21 + 2]!]).toBe('plus-3')
})

test('turning every potential round mirrors the meanings and moves no character of a stroke', () => {
  const window = plainWindow(26, 14)
  const raster = mapRaster(letterO, window)
  const there = mapGrid(raster, alongO, options())
  const turned = mapGrid(raster, (body, at) => -alongO(body, at)!, options())
  expect(turned.glyphs).toEqual(there.glyphs)
  there.meanings.forEach((meaning, c) => {
    if (there.owner[c]! >= 0 && meaning < 7) expect(turned.meanings[c]).toBe(6 - meaning)
  })
})

test('glass that does not light has no step: its own meaning, its own character', () => {
  const grid = mapFrame(script, () => undefined, plainWindow(24, 11), options({ glyphs: 'level' }))
  expect(grid.glyphs[4 * 24 + 5]).toBe('?')
  expect(grid.meanings[4 * 24 + 5]).toBe(meaningIndex('unknown'))
})

test('labels touch no glass of others, and stay away when switched off', () => {
  const pair = scene([
    tube('Kiosk', [
      [15, 30],
      [15, 150],
    ]),
    tube('B', [
      [95, 30],
      [95, 150],
    ]),
  ])
  const window = plainWindow(14, 9)
  expect(text(mapFrame(pair, () => 0, window, options({ labels: true })))[1]).toBe(' [Kiosk B[')
  expect(text(mapFrame(pair, () => 0, window, options()))[1]).toBe(' [       [')
  const narrow = scene([
    tube('Kiosk', [
      [5, 10],
      [5, 50],
    ]),
    tube('B', [
      [35, 10],
      [35, 50],
    ]),
  ])
  expect(
    text(mapFrame(narrow, () => 0, plainWindow(4, 3), options({ labels: true }))).join(''),
  ).not.toContain('K')
})

test('few colours ask for characters that say sign and size', () => {
  expect(([0, 4, 8, 24] as const).map(defaultGlyphs)).toEqual(['level', 'level', 'stroke', 'stroke'])
})

test('a tube seen end-on, a lead straight up and a path outside the window do no harm', () => {
  const upright = scene(
    [
      {
        ...tube('A', [
          [15, 15],
          [16, 15],
        ]),
        name: 'A',
      },
      lead('A.b', 'S1.1', [
        [16, 15],
        [16, 15],
      ]),
      bar('far', [
        [9000, 9000],
        [9900, 9000],
      ]),
    ],
    { terminals: terminals([900, 900], [15, 50]) },
  )
  const window = plainWindow(4, 3)
  expect(text(mapFrame(upright, () => 0, window, options()))).toEqual([' [', '', ' 2'])
  expect(columnAt(window, 0.9)).toBeGreaterThan(4)
  expect(rowAt(window, 0.9)).toBeGreaterThan(3)
})
