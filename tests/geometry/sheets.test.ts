import { describe, expect, it } from 'vitest'
import { fixedNodes } from '../../src/geometry/nodes.js'
import { sheetBodies } from '../../src/geometry/sheets.js'
import type { Metal } from '../../src/layout/layout.js'
import { barBody, tubeBody } from './signs.js'

const plate = (height: number, grounded: boolean): Metal => ({
  kind: 'plate',
  id: 'back',
  grounded,
  corners: [
    { x: 0.6, y: 0.1 },
    { x: 0.2, y: 0.4 },
  ],
  height,
})
const wall = (corners: readonly (readonly [number, number])[]): Metal => ({
  kind: 'wall',
  id: 'return',
  grounded: false,
  path: corners.map(([x, y]) => ({ x, y })),
  from: 0.01,
  to: 0.09,
})
const none = { metal: 'none' } as const

it('a plate is one rectangle with four free edges, however its corners are named', () => {
  const [sheet] = sheetBodies({ metal: [plate(0.02, true)], face: none })
  expect(sheet).toMatchObject({ name: 'back', grounded: true })
  ;[0.4, 0.25, 0.02, 1, 0, 0, 0, 1, 0, 0.2, 0.15].forEach((x, k) => {
    expect(sheet!.rectangles[k]!).toBeCloseTo(x, 12)
  })
  expect([...sheet!.edges]).toEqual([1, 1, 1, 1])
})

it('a plate that lies on a grounded face is grounded; one above it, or on a floating face, is what the file says', () => {
  const grounded = (height: number, metal: 'grounded' | 'floating') =>
    sheetBodies({ metal: [plate(height, false)], face: { metal } })[0]!.grounded
  expect(grounded(0, 'grounded')).toBe(true)
  expect(grounded(0.001, 'grounded')).toBe(false)
  expect(grounded(0, 'floating')).toBe(false)
})

describe('walls', () => {
  const edgesOf = (corners: readonly (readonly [number, number])[]) => {
    const [sheet] = sheetBodies({ metal: [wall(corners)], face: none })
    return {
      pieces: sheet!.rectangles.length / 11,
      chords: sheet!.chords.length / 11,
      edges: [...sheet!.edges],
    }
  }
  it('an open one ends in free edges, a closed one has none but above and below', () => {
    const angle = [
      [0, 0],
      [0.3, 0],
      [0.3, 0.2],
    ] as const
    expect(edgesOf(angle)).toEqual({ pieces: 2, chords: 2, edges: [1, 0, 1, 1, 0, 1, 1, 1] })
    expect(edgesOf([...angle, [0, 0]])).toEqual({
      pieces: 3,
      chords: 3,
      edges: [0, 0, 1, 1, 0, 0, 1, 1, 0, 0, 1, 1],
    })
  })
  it('short pieces of a curve become a few chords; distances keep them all', () => {
    const arc = Array.from({ length: 91 }, (_, k) => {
      const a = (k * Math.PI) / 180
      return [0.2 * Math.cos(a), 0.2 * Math.sin(a)] as const
    })
    const { pieces, chords } = edgesOf(arc)
    expect(pieces).toBe(90)
    expect(chords).toBeLessThan(6)
  })
  it('a repeated point is one corner', () => {
    expect(
      edgesOf([
        [0, 0],
        [0, 0],
        [0.3, 0],
      ]).pieces,
    ).toBe(1)
  })
})

it('sheets have a node each, after the bars and before a floating face', () => {
  const bodies = [
    tubeBody('K', [
      [0, 0, 0],
      [0.1, 0, 0],
    ]),
    barBody('frame', [
      [0, 1, 0],
      [1, 1, 0],
    ]),
  ]
  expect(fixedNodes(bodies, true, 0.05, 2)).toMatchObject({
    firstBar: 3,
    bars: 1,
    firstSheet: 4,
    sheets: 2,
    face: 6,
    count: 7,
  })
})
