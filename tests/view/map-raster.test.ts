import fc from 'fast-check'
import { expect, test } from 'vitest'
import { pointAt } from '../../src/geometry/polyline.js'
import type { MapGrid } from '../../src/view/map.js'
import { mapRaster } from '../../src/view/map-raster.js'
import { sceneBounds } from '../../src/view/map-scene.js'
import { cellAt, fitWindow, turnedOver } from '../../src/view/map-window.js'
import { arc, bar, type Drawn, letterO, mapFrame, options, plainWindow, scene, tube } from './map-signs.js'

test('a circle spans twice as many columns as rows', () => {
  fc.assert(
    fc.property(fc.integer({ min: 20, max: 200 }), fc.integer({ min: 8, max: 60 }), (columns, rows) => {
      const circle = scene([tube('O', arc(0, 0, 100, 100, 0, 360))])
      const window = fitWindow(sceneBounds(circle), columns, rows)
      const { first } = mapRaster(circle, window)
      const covered = Array.from({ length: columns * rows }, (_, c) => c).filter(
        (c) => first[c + 1]! > first[c]!,
      )
      const span = (values: number[]) => Math.max(...values) - Math.min(...values) + 1
      const across = span(covered.map((c) => c % columns))
      const down = span(covered.map((c) => Math.floor(c / columns)))
      // an interval of L cells reaches into more than L and less than L + 2 of them (short touches are left out)
      const radius = 0.1 / window.step
      expect(across / 2 - down).toBeGreaterThanOrEqual(-2)
      expect(across / 2 - down).toBeLessThanOrEqual(1)
      expect(Math.abs(across - 2 * radius)).toBeLessThanOrEqual(2)
      expect(Math.abs(down - radius)).toBeLessThanOrEqual(2)
    }),
  )
})

const corners: fc.Arbitrary<Drawn> = fc.array(
  fc.tuple(fc.double({ min: -50, max: 450, noNaN: true }), fc.double({ min: -50, max: 350, noNaN: true })),
  { minLength: 2, maxLength: 8 },
)

test('owner and path length of a cell name a place of that body in the cell or beside it', () => {
  fc.assert(
    fc.property(corners, corners, fc.boolean(), (one, two, back) => {
      const bodies = [tube('A', one), bar('m', two)]
      const window = { ...plainWindow(40, 15), mirrored: back }
      const grid = mapFrame(scene(bodies), () => 1, window, options())
      grid.owner.forEach((body, c) => {
        if (body < 0) return
        const [x, y] = pointAt(bodies[body]!.line, grid.at[c]!)
        const cell = cellAt(window, x, y)
        // a corner cut off a staircase, or a bump left out, may hold the middle of the pass
        // (a bump is up to 1.1 heights of a row long, and a row is two columns high)
        expect(Math.abs(cell.column - (c % 40))).toBeLessThanOrEqual(2)
        expect(Math.abs(cell.row - Math.floor(c / 40))).toBeLessThanOrEqual(1)
      })
    }),
  )
})

test('walking along a body in small steps meets only cells that it covers, or their neighbours', () => {
  fc.assert(
    fc.property(corners, (path) => {
      const body = tube('A', path)
      const window = plainWindow(40, 15)
      const { first } = mapRaster(scene([body]), window)
      const covered = (column: number, row: number) =>
        column >= 0 &&
        column < 40 &&
        row >= 0 &&
        row < 15 &&
        first[row * 40 + column + 1]! > first[row * 40 + column]!
      for (let s = 0; s <= body.line.length; s += 0.002) {
        const [x, y] = pointAt(body.line, s)
        const cell = cellAt(window, x, y)
        if (cell.column < 1 || cell.column > 38 || cell.row < 1 || cell.row > 13) continue
        const near = [-1, 0, 1].some((dy) =>
          [-1, 0, 1].some((dx) => covered(cell.column + dx, cell.row + dy)),
        )
        expect(near).toBe(true)
      }
    }),
  )
})

// a step apart, so that nearness decides nowhere
const apart = (body: number) => [5000, 3000, -1000, 0][body]

test('a picture from the back is the picture from the front, reversed', () => {
  const window = plainWindow(26, 14)
  const front = mapFrame(letterO, apart, window, options())
  const back = mapFrame(letterO, apart, turnedOver(window), options())
  for (let row = 0; row < 14; row++) {
    const ofRow = (grid: MapGrid) => [...grid.owner.subarray(row * 26, (row + 1) * 26)]
    expect(ofRow(back)).toEqual(ofRow(front).reverse())
  }
})
