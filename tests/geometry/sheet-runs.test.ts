import { describe, expect, it } from 'vitest'
import { withLeadIndex } from '../../src/geometry/close-runs.js'
import type { CloseRun } from '../../src/geometry/runs.js'
import { fixedSheetRuns, leadSheetRuns } from '../../src/geometry/sheet-runs.js'
import { sheetBodies } from '../../src/geometry/sheets.js'
import type { Metal, Point } from '../../src/layout/layout.js'
import { barBody, leadOf, tubeBody } from './signs.js'

const sheets = (...metal: Metal[]) => sheetBodies({ metal, face: { metal: 'none' } })
const wall = (id: string, corners: readonly (readonly [number, number])[]): Metal => ({
  kind: 'wall',
  id,
  grounded: true,
  path: corners.map(([x, y]) => ({ x, y })),
  from: 0,
  to: 0.09,
})
const plate = (height: number): Metal => ({
  kind: 'plate',
  id: 'back',
  grounded: true,
  corners: [
    { x: 0, y: 0 },
    { x: 0.3, y: 0.2 },
  ],
  height,
})
const least = ({ gap }: CloseRun): number => Math.min(...gap)
const straight: Point[] = [
  [0, 0.1, 0.045],
  [0.3, 0.1, 0.045],
]

describe('a tube of 12 mm and a wall', () => {
  it('clear gap is the distance to the sheet less the radius, from either side', () => {
    for (const y of [0.08, 0.12]) {
      const [run, ...more] = fixedSheetRuns(
        [tubeBody('K', straight)],
        sheets(
          wall('side', [
            [-0.1, y],
            [0.4, y],
          ]),
        ),
      )
      expect(more).toEqual([])
      expect(run).toMatchObject({ a: { kind: 'fixed', index: 0 }, b: { kind: 'sheet', index: 0 } })
      expect(least(run!)).toBeCloseTo(0.014, 12)
      expect([...run!.pointB.slice(0, 3)]).toEqual([0, y, 0.045])
      expect(run!.atB.every((t) => t === 0)).toBe(true)
    }
  })
  it('beside it the edge counts, above it the upper one', () => {
    const edge = fixedSheetRuns(
      [tubeBody('K', straight)],
      sheets(
        wall('side', [
          [0.33, 0.1],
          [0.5, 0.1],
        ]),
      ),
    )
    expect(least(edge[0]!)).toBeCloseTo(0.024, 9)
    expect(edge[0]!.atA[edge[0]!.gap.indexOf(least(edge[0]!))]).toBeCloseTo(0.3, 9)
    const over = straight.map(([x, y]): Point => [x, y, 0.12])
    const upper = fixedSheetRuns(
      [tubeBody('K', over)],
      sheets(
        wall('side', [
          [0, 0.14],
          [0.3, 0.14],
        ]),
      ),
    )
    expect(least(upper[0]!)).toBeCloseTo(0.05 - 0.006, 9)
  })
  it('out of reach of 65 mm there is no run', () => {
    const of = (y: number) =>
      fixedSheetRuns(
        [tubeBody('K', straight)],
        sheets(
          wall('side', [
            [0, y],
            [0.3, y],
          ]),
        ),
      )
    expect(of(0.1 + 0.071 - 1e-6)).toHaveLength(1)
    expect(of(0.1 + 0.071 + 1e-6)).toEqual([])
  })
  it('glass through a wall touches it, between two stations too', () => {
    const [run] = fixedSheetRuns(
      [tubeBody('K', straight)],
      sheets(
        wall('side', [
          [0.1234, 0],
          [0.1234, 0.2],
        ]),
      ),
    )
    expect(least(run!)).toBe(0)
  })
  it('the nearest place of a slanting pass is found between stations', () => {
    const slanting: Point[] = [
      [0, 0.06, 0.045],
      [0.1013, 0.1, 0.045],
      [0.2, 0.05, 0.045],
    ]
    const [run] = fixedSheetRuns(
      [tubeBody('K', slanting)],
      sheets(
        wall('side', [
          [-0.1, 0.12],
          [0.4, 0.12],
        ]),
      ),
    )
    expect(least(run!)).toBeCloseTo(0.014, 9)
  })
})

it('a can round a tube is one conductor: one run, at its nearest wall', () => {
  const can = wall('can', [
    [-0.05, 0.07],
    [0.35, 0.07],
    [0.35, 0.14],
    [-0.05, 0.14],
    [-0.05, 0.07],
  ])
  const [run, ...more] = fixedSheetRuns([tubeBody('K', straight)], sheets(can))
  expect(more).toEqual([])
  expect(least(run!)).toBeCloseTo(0.024, 12)
})

it('a plate in front, or behind', () => {
  for (const height of [0.025, 0.065])
    expect(least(fixedSheetRuns([tubeBody('K', straight)], sheets(plate(height)))[0]!)).toBeCloseTo(0.014, 12)
})

it('bars make no pairs with sheets; leads do, but for those in metal conduit', () => {
  expect(fixedSheetRuns([barBody('frame', straight)], sheets(plate(0.025)))).toEqual([])
  const runs = leadSheetRuns(leadOf(['S1.1', 'K.a'], straight), sheets(plate(0.005), plate(0.025)))
  expect(runs.map((run) => run.b)).toEqual([
    { kind: 'sheet', index: 0 },
    { kind: 'sheet', index: 1 },
  ])
  expect(least(runs[1]!)).toBeCloseTo(0.0165, 12)
  expect(withLeadIndex(runs, 3)[0]).toMatchObject({
    a: { kind: 'lead', index: 3 },
    b: { kind: 'sheet', index: 0 },
  })
  expect(leadSheetRuns(leadOf(['S1.1', 'K.a'], straight, 'metal'), sheets(plate(0.025)))).toEqual([])
})
