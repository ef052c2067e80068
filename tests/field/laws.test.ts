import { describe, expect, it } from 'vitest'
import { fourPiEpsilon } from '../../src/field/constants.js'
import { fineField, prepareField, usualField } from '../../src/field/fixed-field.js'
import { leadField } from '../../src/field/lead-field.js'
import { nodeCapacitance, reducedPotential } from '../../src/field/node-capacitance.js'
import type { Body } from '../../src/geometry/conductors.js'
import { fixedNodes } from '../../src/geometry/nodes.js'
import type { Point } from '../../src/layout/layout.js'
import { bar, inverse, lead, smallSign, solved, tube, wire7 } from './sign.js'

describe.each(['none', 'grounded', 'floating'] as const)('laws of the conductor matrix, face %s', (metal) => {
  const { tubes, frame, leads } = smallSign()
  const matrix = solved([...tubes, frame], leads, metal)

  it('is symmetric', () => {
    for (let i = 0; i < matrix.length; i++)
      for (let j = 0; j < i; j++)
        expect(Math.abs(matrix[i]![j]! - matrix[j]![i]!)).toBeLessThan(1e-12 * matrix[i]![i]!)
  })
  it('no two conductors repel each other, none holds less than nothing against ground', () => {
    matrix.forEach((row, i) => {
      row.forEach((x, j) => {
        if (i !== j) expect(x).toBeLessThan(1e-6 * row[i]!)
      })
      expect(row.reduce((sum, x) => sum + x, 0)).toBeGreaterThan(-1e-6 * row[i]!)
    })
  })
  it('does not depend on the order of bodies and leads', () => {
    const turned = solved([...tubes].reverse(), [...leads].reverse(), metal)
    const straight = solved(tubes, leads, metal)
    const count = straight.length
    const place = (i: number): number => {
      if (i < 3) return 2 - i
      return metal === 'floating' && i === 3 ? 3 : 2 * (count - 2) - i
    }
    for (let i = 0; i < count; i++)
      for (let j = 0; j < count; j++) {
        const other = turned[place(i)]![place(j)]!
        expect(Math.abs(straight[i]![j]! - other)).toBeLessThan(1e-9 * straight[i]![i]!)
      }
  })
})

it('all lengths times 10: all capacitances times 10', () => {
  const { tubes, frame, leads } = smallSign()
  const grown = <B extends Body>(body: B): B => ({
    ...body,
    line: {
      points: body.line.points.map((x) => 10 * x),
      at: body.line.at.map((x) => 10 * x),
      length: 10 * body.line.length,
    },
    outerRadius: 10 * body.outerRadius,
    equivalentRadius: 10 * body.equivalentRadius,
  })
  const small = solved([...tubes, frame], leads, 'grounded')
  const large = solved([...tubes, frame].map(grown), leads.map(grown), 'grounded', usualField, 0.5)
  small.forEach((row, i) => {
    row.forEach((x, j) => {
      expect(Math.abs(large[i]![j]! / 10 - x)).toBeLessThan(1e-9 * row[i]!)
    })
  })
})

it('leads added one by one are leads solved all at once with one dense inverse', () => {
  const { tubes, frame, leads } = smallSign()
  const bodies = [...tubes, frame]
  const nodes = fixedNodes(bodies, false)
  const fixed = prepareField(bodies, nodes, { metal: 'grounded' })
  const fields = leads.map((body) => leadField(fixed, body))
  const open = fields.filter((field) => field.kind === 'open')
  const { count, matrix } = reducedPotential(fixed, open)
  const c = inverse(
    Array.from({ length: count }, (_, i) => Array.from(matrix.subarray(i * count, (i + 1) * count))),
  )
  // weights of all nodes: the fixed ones as prepared, one for each lead
  const f = fixed.system.segments.count
  const weights = Array.from({ length: nodes.count + open.length }, (_, v) => {
    const row = new Array<number>(count).fill(0)
    if (v < nodes.count) for (let i = 0; i < f; i++) row[i] = fixed.weights[v * f + i]!
    else {
      const before = open
        .slice(0, v - nodes.count)
        .reduce((sum, field) => sum + field.system.segments.count, f)
      row.fill(1, before, before + open[v - nodes.count]!.system.segments.count)
    }
    return row
  })
  const quick = nodeCapacitance(fixed, fields)
  const along = weights.map((w) => c.map((row) => row.reduce((sum, x, j) => sum + x * w[j]!, 0)))
  weights.forEach((w, i) => {
    along.forEach((x, j) => {
      const slow = fourPiEpsilon * x.reduce((sum, value, k) => sum + value * w[k]!, 0)
      const own = quick.matrix[i * (quick.count + 1)]!
      expect(Math.abs(quick.matrix[i * quick.count + j]! - slow)).toBeLessThan(1e-9 * own)
    })
  })
})

describe('quarter segments and twice the harmonics change little', () => {
  it.each([
    [
      'a hairpin with legs 3 mm apart',
      [
        tube('T', [
          [0, 0, 0.04],
          [0.1, 0, 0.04],
          [0.1, 0.015, 0.04],
          [0, 0.015, 0.04],
        ]),
      ],
      0.03,
    ],
    [
      'two tubes that cross at a gap of 3 mm',
      [
        tube('A', [
          [-0.08, 0, 0.04],
          [0.08, 0, 0.04],
        ]),
        tube('B', [
          [0, -0.08, 0.055],
          [0, 0.08, 0.055],
        ]),
      ],
      0.04,
    ],
  ] as const)('%s', (_, bodies, tolerance) => {
    const usual = solved(bodies, [], 'grounded')
    const fine = solved(bodies, [], 'grounded', fineField)
    usual.forEach((row, i) => {
      row.forEach((x, j) => {
        expect(Math.abs(x - fine[i]![j]!)).toBeLessThan(tolerance * fine[i]![i]!)
      })
    })
  })
})

describe('drawings that are hard on the equations still give an answer', () => {
  const angles = Array.from({ length: 16 }, (_, k) => 20 + 10 * k)
  const path = (deg: number): Point[] => {
    const a = (deg * Math.PI) / 180
    return [
      [0, 0, 0.04],
      [0.15, 0, 0.04],
      [0.15 - 0.15 * Math.cos(a), 0.15 * Math.sin(a), 0.04],
    ]
  }
  it.each(angles)('a corner of %i°', (deg) => {
    const c = solved([tube('T', path(deg))], [], 'grounded')[0]![0]! * 1e12
    // 0.3 m of glass at 21.5 pF/m (2πε0/acosh(40/5.85)) is 6.4 pF; legs that lie together have about half, ends add some
    expect(c).toBeGreaterThan(3.4)
    expect(c).toBeLessThan(8.5)
  })
  it('glass through glass, one path twice, a tube shorter than its radius, a passage through the face', () => {
    const bodies = [
      tube('A', [
        [-0.1, 0, 0.04],
        [0.1, 0, 0.04],
      ]),
      tube('B', [
        [0, -0.1, 0.04],
        [0, 0.1, 0.04],
      ]),
      tube('C', [
        [-0.1, 0, 0.04],
        [0.1, 0, 0.04],
      ]),
      tube('D', [
        [0.2, 0, 0.04],
        [0.203, 0, 0.04],
      ]),
      tube('E', [
        [0.3, 0, 0.04],
        [0.3, 0, -0.04],
        [0.4, 0, -0.04],
      ]),
      bar(
        'F',
        [
          [0, 0, 0.01],
          [0.2, 0, 0.01],
          [0.2, 0.1, 0.01],
          [0, 0.1, 0.01],
          [0, 0, 0.01],
        ],
        0.004,
      ),
    ]
    const matrix = solved(
      bodies,
      [
        lead(
          ['S.1', 'D.a'],
          [
            [0.2, -0.1, 0.02],
            [0.2, 0, 0.04],
          ],
        ),
      ],
      'grounded',
    )
    matrix.forEach((row, i) => {
      expect(row.every(Number.isFinite)).toBe(true)
      expect(row[i]).toBeGreaterThan(0)
    })
  })
})

it('conductors on opposite sides of a metal face do not see each other', () => {
  const pair = [0.03, -0.03].map((z) =>
    tube(`T${z}`, [
      [0, 0, z],
      [0.2, 0, z],
    ]),
  )
  expect(solved(pair, [], 'grounded')[0]![1]).toBe(0)
})

it('a lead in metal conduit has only the eccentric coaxial capacitance, whatever is near', () => {
  const body = lead(
    ['S.1', 'S.2'],
    [
      [0, 0.02, 0.03],
      [0.5, 0.02, 0.03],
    ],
    wire7,
    { conduit: 'metal', boreRadius: 0.008 },
  )
  const matrix = solved(
    [
      tube('T', [
        [0, 0, 0.04],
        [0.5, 0, 0.04],
      ]),
    ],
    [body],
    'floating',
  )
  // two eccentric cylinders seen the other way round: P per metre from images in a circle
  const [r, a, e] = [0.008, 0.0035 * (0.6 / 3.5) ** (1 / 3), 0.0045]
  const s = (r * r - a * a - e * e) / (2 * e)
  const c = Math.sqrt(s * s - a * a)
  const perMetre = (2 * Math.PI * 8.8541878128e-12) / (Math.asinh(c / a) - Math.asinh(c / r))
  expect(matrix[2]![2]! / 0.5 / perMetre).toBeCloseTo(1, 9)
  expect(matrix[2]![0]).toBe(0)
  expect(matrix[2]![1]).toBe(0)
})
