/** Plates and upright walls: capacitances against published and exact ones, and the laws of the conductor matrix. */
import { describe, expect, it } from 'vitest'
import { epsilon } from '../../src/field/constants.js'
import { type FieldOptions, prepareField, usualField } from '../../src/field/fixed-field.js'
import { leadField } from '../../src/field/lead-field.js'
import { nodeCapacitance } from '../../src/field/node-capacitance.js'
import type { FixedBody, LeadBody } from '../../src/geometry/conductors.js'
import { fixedNodes } from '../../src/geometry/nodes.js'
import { sheetBodies } from '../../src/geometry/sheets.js'
import type { Face, Metal, Point } from '../../src/layout/layout.js'
import { bare, conductors, glass15, lead, smallSign, tube, wire7 } from './sign.js'

const plate = (x0: number, y0: number, x1: number, y1: number, height: number): Metal => ({
  kind: 'plate',
  id: `plate ${height}`,
  grounded: false,
  corners: [
    { x: x0, y: y0 },
    { x: x1, y: y1 },
  ],
  height,
})
const wall = (path: readonly (readonly [number, number])[], from: number, to: number): Metal => ({
  kind: 'wall',
  id: 'wall',
  grounded: false,
  path: path.map(([x, y]) => ({ x, y })),
  from,
  to,
})

/** Conductor matrix, F: tubes, bars, sheets, floating face, leads. */
function solved(
  metal: readonly Metal[],
  bodies: readonly FixedBody[] = [],
  leads: readonly LeadBody[] = [],
  face: Face = { metal: 'none' },
  options: FieldOptions = usualField,
  spacing = 0.05,
): number[][] {
  const sheets = sheetBodies({ metal, face })
  const nodes = fixedNodes(bodies, face.metal === 'floating', spacing, sheets.length)
  const fixed = prepareField(bodies, nodes, face, options, sheets)
  return conductors(
    nodeCapacitance(
      fixed,
      leads.map((body) => leadField(fixed, body)),
    ),
    nodes,
  )
}
const total = (matrix: readonly (readonly number[])[]): number => matrix.flat().reduce((sum, x) => sum + x, 0)
const off = (value: number, exact: number): number => Math.abs(value / exact - 1)

const ring = (x0: number, y0: number, x1: number, y1: number) =>
  [
    [x0, y0],
    [x1, y0],
    [x1, y1],
    [x0, y1],
    [x0, y0],
  ] as const
const box = (x: number, y: number, z: number): Metal[] => [
  plate(0, 0, x, y, 0),
  plate(0, 0, x, y, z),
  wall(ring(0, 0, x, y), 0, z),
]

describe('alone in free space', () => {
  it('a square plate of side 1 m: 40.811 pF (F. H. Read, J. Comput. Phys. 133, 1997; from memory)', () => {
    expect(off(total(solved([plate(0, 0, 1, 1, 0)])), 40.811e-12)).toBeLessThan(0.012)
    expect(
      off(
        total(
          solved([
            wall(
              [
                [0, 0],
                [1, 0],
              ],
              0,
              1,
            ),
          ]),
        ),
        40.811e-12,
      ),
    ).toBeLessThan(0.012)
  })
  it('a closed cube of side 1 m: 73.510 pF (C.-O. Hwang, M. Mascagni, J. Appl. Phys. 95, 2004 [R])', () => {
    expect(off(total(solved(box(1, 1, 1))), 73.51e-12)).toBeLessThan(0.01)
  })
  it('a wall drawn round in many short pieces is the wall of a few chords', () => {
    const circle = (pieces: number) =>
      Array.from({ length: pieces + 1 }, (_, k) => {
        const a = (2 * Math.PI * k) / pieces
        return [0.2 * Math.cos(a), 0.2 * Math.sin(a)] as const
      })
    const few = total(solved([wall(circle(16), 0, 0.09)]))
    expect(off(total(solved([wall(circle(200), 0, 0.09)])), few)).toBeLessThan(0.01)
  })
})

describe('two parallel strips, w wide and d apart', () => {
  // per metre of length: ε0 [w/d + (1 + ln 2πw/d)/π] (Maxwell's edge correction for thin plates, from memory; w ≫ d)
  it.each([
    [0.1, 0.01],
    [0.1, 0.005],
  ])('w %f, d %f: with the correction of the edges', (w, d) => {
    const between = (length: number): number => {
      const c = solved([plate(0, 0, w, length, 0), plate(0, 0, w, length, d)])
      return (c[0]![0]! - c[0]![1]!) / 2
    }
    const perMetre = (between(1.2) - between(0.6)) / 0.6
    const exact = epsilon * (w / d + (1 + Math.log((2 * Math.PI * w) / d)) / Math.PI)
    expect(off(perMetre, exact)).toBeLessThan(0.012)
  })
})

describe('a long cylinder beside a large sheet: 2πε0/acosh(h/a) (exact for an endless plane)', () => {
  const difference = (of: (length: number) => number[][], row: number): number =>
    (of(0.8)[row]![row]! - of(0.4)[row]![row]!) / 0.4
  const exact = (h: number, { core, outer, permittivity }: typeof glass15): number =>
    (2 * Math.PI * epsilon) / Math.acosh(h / (outer * (core / outer) ** (1 / permittivity)))

  it.each([0.01, 0.015, 0.02, 0.03])('a 15 mm tube, axis %f m from a wall', (h) => {
    const path = (length: number): Point[] => [
      [0, 0, 0.045],
      [length, 0, 0.045],
    ]
    const of = (length: number): number[][] =>
      solved(
        [
          wall(
            [
              [-0.4, h],
              [length + 0.4, h],
            ],
            -0.3,
            0.4,
          ),
        ],
        [tube('T', path(length), glass15)],
      )
    expect(off(difference(of, 0), exact(h, glass15))).toBeLessThan(0.005)
  })
  it.each([
    [0.005, 0.008],
    [0.01, 0.008],
    [0.02, 0.008],
  ])('a lead, %f m over a plate that was cut without it', (h, tolerance) => {
    const of = (length: number): number[][] =>
      solved(
        [plate(-0.4, -0.3, length + 0.4, 0.3, 0)],
        [],
        [
          lead(
            ['S.1', 'S.2'],
            [
              [0, 0, h],
              [length, 0, h],
            ],
          ),
        ],
      )
    expect(off(difference(of, 1), exact(h, wire7))).toBeLessThan(tolerance)
  })
  it('two leads side by side over it are what two fixed cylinders of the same size are', () => {
    const path = (y: number): Point[] => [
      [0, y, 0.008],
      [0.5, y, 0.008],
    ]
    const sheet = [plate(-0.2, -0.15, 0.7, 0.17, 0)]
    const moving = solved(sheet, [], [lead(['S.1', 'S.2'], path(0)), lead(['S.1', 'S.3'], path(0.02))])
    const fine = { ...usualField, patch: 0.6, mostPatches: 900 }
    const fixed = solved(
      sheet,
      [tube('A', path(0), wire7), tube('B', path(0.02), wire7)],
      [],
      { metal: 'none' },
      fine,
    )
    const place = [2, 0, 1]
    moving.forEach((row, i) => {
      row.forEach((x, j) => {
        // what a lead changes between fixed conductors alone is left out: 1.5 %
        expect(Math.abs(x - fixed[place[i]!]![place[j]!]!)).toBeLessThan(0.02 * row[i]!)
      })
    })
  })
})

describe('over a grounded face', () => {
  const over = (height: number): number =>
    solved([plate(0, 0, 0.3, 0.2, height)], [], [], { metal: 'grounded' })[0]![0]!
  it('a plate comes up to ε0 A/h as it sinks', () => {
    const shares = [0.1, 0.02, 0.005, 0.001].map((h) => over(h) / ((epsilon * 0.06) / h))
    shares.forEach((share, k) => {
      expect(share).toBeGreaterThan(1)
      if (k > 0) expect(share).toBeLessThan(shares[k - 1]!)
    })
    // edges of 1 m, the correction above with twice the height: 1 + h/(2πA) · P (1 + ln 2πw/2h), about 3 % at 1 mm
    expect(shares.at(-1)).toBeLessThan(1.05)
  })
  it('lying on the face it stays a paint coat above it', () => {
    expect(over(0)).toBe(over(0.0005))
    expect(over(0) / ((epsilon * 0.06) / 0.0005)).toBeCloseTo(1, 1)
  })
  it('a tube over a grounded plate low on a grounded face sees hardly more than the face lower by its height', () => {
    const path: Point[] = [
      [0, 0, 0.04],
      [0.4, 0, 0.04],
    ]
    const plain = solved([], [tube('T', path)], [], { metal: 'grounded' })[0]![0]!
    const sheet = [plate(-0.3, -0.3, 0.7, 0.3, 0.002)]
    const raised = solved(sheet, [tube('T', path)], [], { metal: 'grounded' })[0]![0]!
    const lowered = solved(
      [],
      [
        tube(
          'T',
          path.map(([x, y, z]): Point => [x, y, z - 0.002]),
        ),
      ],
      [],
      {
        metal: 'grounded',
      },
    )[0]![0]!
    expect(raised).toBeGreaterThan(plain)
    expect(off(raised, lowered)).toBeLessThan(0.003)
  })
  it('what is in front of it does not see what is behind; a wall through it is cut there', () => {
    const through = wall(
      [
        [-0.1, 0.05],
        [0.3, 0.05],
      ],
      -0.05,
      0.05,
    )
    const of = (...z: number[]): number[][] =>
      solved(
        [through],
        z.map((height) =>
          tube(`T${height}`, [
            [0, 0, height],
            [0.2, 0, height],
          ]),
        ),
        [],
        { metal: 'grounded' },
      )
    const both = of(0.03, -0.03)
    expect(both[0]![1]).toBe(0)
    // the same on both sides, and the same as alone
    expect(both[0]![2]! / both[1]![2]!).toBeCloseTo(1, 9)
    expect(off(both[0]![2]!, of(0.03)[0]![1]!)).toBeLessThan(0.005)
  })
})

describe.each(['none', 'grounded', 'floating'] as const)('laws with sheets, face %s', (metal) => {
  const { tubes, frame, leads } = smallSign()
  const sheets = [
    plate(0.02, 0.02, 0.28, 0.2, 0.005),
    wall(ring(-0.03, -0.02, 0.32, 0.36), 0, 0.09),
    plate(0.05, 0.05, 0.15, 0.1, 0.12),
  ]
  const face: Face = metal === 'none' ? { metal } : { metal, size: [1, 0.5] }
  const matrix = solved(sheets, [...tubes, frame], leads, face)

  it('symmetric; nothing repels; nothing holds less than nothing against ground', () => {
    matrix.forEach((row, i) => {
      row.forEach((x, j) => {
        expect(Math.abs(x - matrix[j]![i]!)).toBeLessThan(1e-12 * row[i]!)
        if (i !== j) expect(x).toBeLessThan(1e-6 * row[i]!)
      })
      expect(row.reduce((sum, x) => sum + x, 0)).toBeGreaterThan(-1e-6 * row[i]!)
    })
  })
  it('the order of sheets, bodies and leads is irrelevant', () => {
    const turned = solved([...sheets].reverse(), [...tubes].reverse(), [...leads].reverse(), face)
    const straight = solved(sheets, tubes, leads, face)
    const faces = metal === 'floating' ? [6] : []
    const first = 6 + faces.length
    const place = [2, 1, 0, 5, 4, 3, ...faces, first + 2, first + 1, first]
    straight.forEach((row, i) => {
      row.forEach((x, j) => {
        expect(Math.abs(x - turned[place[i]!]![place[j]!]!)).toBeLessThan(1e-9 * row[i]!)
      })
    })
  })
})

it('all lengths times 10: all capacitances times 10', () => {
  const of = (scale: number): number[][] => {
    const path: Point[] = [
      [0.05, 0.06, 0.05],
      [0.25, 0.05, 0.05],
    ]
    const grown = path.map((p): Point => [scale * p[0], scale * p[1], scale * p[2]])
    const section = bare(0.006 * scale)
    return solved(
      [
        plate(0, 0, 0.3 * scale, 0.1 * scale, 0.02 * scale),
        wall(
          ring(0, 0, 0.3 * scale, 0.1 * scale).map(([x, y]) => [x, y] as const),
          0.03 * scale,
          0.09 * scale,
        ),
      ],
      [tube('T', grown, section)],
      [],
      { metal: 'grounded' },
      usualField,
      0.05 * scale,
    )
  }
  const small = of(1)
  of(10).forEach((row, i) => {
    row.forEach((x, j) => {
      // patches are not made smaller than 2 mm whatever the scale, and what lies on the face is not scaled
      expect(Math.abs(x / 10 - small[i]![j]!)).toBeLessThan(1e-9 * small[i]![i]!)
    })
  })
})

it('a closed can hides what is inside from what is outside', () => {
  const inside = tube(
    'in',
    [
      [0.05, 0.05, 0.045],
      [0.25, 0.05, 0.045],
    ],
    glass15,
  )
  const outside = tube(
    'out',
    [
      [0.05, 0.16, 0.045],
      [0.25, 0.16, 0.045],
    ],
    glass15,
  )
  const open = solved([], [inside, outside])
  const shut = solved(box(0.3, 0.1, 0.09), [inside, outside])
  // a quarter of the tube's capacitance without the can, a hundred-thousandth with it
  expect(-open[0]![1]! / open[0]![0]!).toBeGreaterThan(0.2)
  expect(Math.abs(shut[0]![1]! / shut[0]![0]!)).toBeLessThan(1e-4)
  // all its field lines end on the can: what the patches let through is under a thousandth
  expect(Math.abs(shut[0]!.reduce((sum, x) => sum + x, 0) / shut[0]![0]!)).toBeLessThan(1e-3)
})

describe('drawings that are hard on the equations still give an answer', () => {
  it('sheets in one place, glass through a wall and on it, a tube ending in a plate', () => {
    const matrix = solved(
      [
        wall(
          [
            [0, 0],
            [0.3, 0],
          ],
          0,
          0.09,
        ),
        wall(
          [
            [0, 0],
            [0.3, 0],
          ],
          0,
          0.09,
        ),
        plate(0, -0.1, 0.3, 0.1, 0.02),
      ],
      [
        tube('through', [
          [0.1, -0.1, 0.05],
          [0.1, 0.1, 0.05],
        ]),
        tube('on', [
          [0, 0.006, 0.06],
          [0.3, 0.006, 0.06],
        ]),
        tube('in', [
          [0, 0.002, 0.08],
          [0.3, 0.002, 0.08],
        ]),
        tube('into', [
          [0.2, 0.05, 0.02],
          [0.2, 0.05, 0.1],
        ]),
      ],
      [
        lead(
          ['S.1', 'S.2'],
          [
            [0, 0, 0.03],
            [0.3, 0, 0.03],
          ],
        ),
      ],
    )
    matrix.forEach((row, i) => {
      expect(row.every(Number.isFinite)).toBe(true)
      expect(row[i]).toBeGreaterThan(0)
    })
  })
})
