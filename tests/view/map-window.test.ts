import fc from 'fast-check'
import { expect, test } from 'vitest'
import {
  cellAt,
  columnAt,
  fitWindow,
  inside,
  type MapWindow,
  panned,
  placeAt,
  resized,
  revealed,
  rowAt,
  turnedOver,
  zoomed,
} from '../../src/view/map-window.js'

const windows: fc.Arbitrary<MapWindow> = fc.record({
  columns: fc.integer({ min: 1, max: 300 }),
  rows: fc.integer({ min: 1, max: 100 }),
  x: fc.double({ min: -5, max: 5, noNaN: true }),
  y: fc.double({ min: -5, max: 5, noNaN: true }),
  step: fc.double({ min: 1e-3, max: 1, noNaN: true }),
  aspect: fc.double({ min: 1, max: 3, noNaN: true }),
  mirrored: fc.boolean(),
})
const cells = fc.record({
  column: fc.integer({ min: -500, max: 500 }),
  row: fc.integer({ min: -200, max: 200 }),
})

test('the middle of a cell lies in that cell', () => {
  fc.assert(
    fc.property(windows, cells, (window, cell) => {
      const { x, y } = placeAt(window, cell)
      expect(cellAt(window, x, y)).toEqual(cell)
    }),
  )
})

test('zooming leaves the place under the cell where it is, and back again restores the window', () => {
  fc.assert(
    fc.property(windows, cells, fc.double({ min: 0.25, max: 4, noNaN: true }), (window, cell, factor) => {
      const closer = zoomed(window, factor, cell)
      const before = placeAt(window, cell)
      const after = placeAt(closer, cell)
      expect(after.x).toBeCloseTo(before.x, 6)
      expect(after.y).toBeCloseTo(before.y, 6)
      const back = zoomed(closer, 1 / factor, cell)
      expect(back.step).toBeCloseTo(window.step, 9)
      expect(back.x).toBeCloseTo(window.x, 6)
    }),
  )
})

test('panning by columns and rows moves every place by as many cells, from either side', () => {
  fc.assert(
    fc.property(windows, cells, (window, { column, row }) => {
      const moved = panned(window, column, row)
      expect(columnAt(moved, 0.1) - columnAt(window, 0.1)).toBeCloseTo(-column, 6)
      expect(rowAt(moved, 0.1) - rowAt(window, 0.1)).toBeCloseTo(-row, 6)
    }),
  )
})

test('from the back a place is as far from the other edge', () => {
  fc.assert(
    fc.property(windows, fc.double({ min: -5, max: 5, noNaN: true }), (window, x) => {
      expect(columnAt(window, x) + columnAt(turnedOver(window), x)).toBeCloseTo(window.columns, 6)
    }),
  )
})

test('a fitted window holds every corner with a free cell round it and touches two margins', () => {
  const sizes = fc.double({ min: 0.05, max: 10, noNaN: true })
  fc.assert(
    fc.property(
      sizes,
      sizes,
      fc.integer({ min: 3, max: 250 }),
      fc.integer({ min: 3, max: 70 }),
      (w, h, columns, rows) => {
        const window = fitWindow({ left: 1, top: 2, right: 1 + w, bottom: 2 + h }, columns, rows)
        const left = columnAt(window, 1)
        const top = rowAt(window, 2)
        expect(left).toBeGreaterThan(1 - 1e-9)
        expect(top).toBeGreaterThan(1 - 1e-9)
        expect(columnAt(window, 1 + w)).toBeLessThan(columns - 1 + 1e-9)
        expect(rowAt(window, 2 + h)).toBeLessThan(rows - 1 + 1e-9)
        expect(Math.min(left, top)).toBeCloseTo(1.01, 6)
      },
    ),
  )
})

test('a fitted window is never wider scaled than high', () => {
  const window = fitWindow({ left: 0, top: 0, right: 0.4, bottom: 0.4 }, 80, 24)
  expect(columnAt(window, 0.4) - columnAt(window, 0)).toBeCloseTo(
    2 * (rowAt(window, 0.4) - rowAt(window, 0)),
    9,
  )
})

test('revealing moves a hidden place inside, and leaves the view alone where it is inside already', () => {
  fc.assert(
    fc.property(windows, cells, (window, cell) => {
      const { x, y } = placeAt(window, cell)
      const shown = revealed(window, x, y)
      expect(inside(shown, cellAt(shown, x, y))).toBe(true)
    }),
  )
  const window = fitWindow({ left: 0, top: 0, right: 1, bottom: 1 }, 80, 24)
  expect(revealed(window, 0.5, 0.5)).toEqual(window)
})

test('a new size keeps the middle and the scale', () => {
  const window = fitWindow({ left: 0, top: 0, right: 1, bottom: 1 }, 80, 24)
  const { columns, rows, ...rest } = window
  expect(resized(window, 100, 30)).toEqual({ columns: 100, rows: 30, ...rest })
  expect([columns, rows]).toEqual([80, 24])
})
