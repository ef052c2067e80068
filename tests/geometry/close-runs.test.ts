import { describe, expect, it } from 'vitest'
import { fixedRuns, leadLeadRuns, leadRuns, withLeadIndex } from '../../src/geometry/close-runs.js'
import type { CloseRun } from '../../src/geometry/runs.js'
import type { Face, Point } from '../../src/layout/layout.js'
import { barBody, leadOf, noFace, tubeBody } from './signs.js'

const least = (run: CloseRun): number => Math.min(...run.gap)
const arc = (r: number, pieces: number, leg: number): Point[] => [
  [-leg, r, 0.04],
  ...Array.from({ length: pieces + 1 }, (_, i): Point => {
    const angle = (Math.PI * i) / pieces
    return [r * Math.sin(angle), r * Math.cos(angle), 0.04]
  }),
  [-leg, -r, 0.04],
]

describe('two tubes', () => {
  it('parallel at 20 mm axis distance have 8 mm of air all along', () => {
    const bodies = [
      tubeBody('K', [
        [0, 0, 0],
        [0.3, 0, 0],
      ]),
      tubeBody('I', [
        [0, 0.02, 0],
        [0.3, 0.02, 0],
      ]),
    ]
    const runs = fixedRuns(bodies, noFace)
    expect(runs).toHaveLength(1)
    const run = runs[0]!
    expect([run.a, run.b]).toEqual([
      { kind: 'fixed', index: 0 },
      { kind: 'fixed', index: 1 },
    ])
    for (const gap of run.gap) expect(gap).toBeCloseTo(0.008, 12)
    expect(run.atA[0]).toBe(0)
    expect(run.atA.at(-1)).toBeCloseTo(0.3, 12)
    expect([...run.pointB.slice(0, 3)]).toEqual([0, 0.02, 0])
  })

  it('skew have the crossing itself as least place', () => {
    // the common perpendicular of the x axis and a line in the plane z = 25 mm through (0.1234, 0)
    const direction = [Math.cos(1.1), Math.sin(1.1)] as const
    const at = (k: number): Point => [0.1234 + k * direction[0], k * direction[1], 0.025]
    const runs = fixedRuns(
      [
        tubeBody('K', [
          [0, 0, 0],
          [0.3, 0, 0],
        ]),
        tubeBody('I', [at(-0.111), at(0.237)]),
      ],
      noFace,
    )
    expect(runs).toHaveLength(1)
    const run = runs[0]!
    const k = run.gap.indexOf(least(run))
    expect(run.gap[k]).toBeCloseTo(0.013, 12)
    expect(run.atA[k]).toBeCloseTo(0.1234, 9)
    expect(run.atB[k]).toBeCloseTo(0.111, 9)
  })

  it('just in reach between two stations are found, just out of reach are not', () => {
    const pair = (z: number) => [
      tubeBody('K', [
        [0, 0, 0],
        [0.2, 0, 0],
      ]),
      tubeBody('I', [
        [0.0525, -0.2, z],
        [0.0525, 0.2, z],
      ]),
    ]
    expect(fixedRuns(pair(0.077 - 1e-6), noFace)).toHaveLength(1)
    expect(fixedRuns(pair(0.077 + 1e-6), noFace)).toHaveLength(0)
  })

  it('that meet or lie in each other have gap 0 and finite places', () => {
    const path: Point[] = [
      [0, 0, 0],
      [0.1, 0, 0],
      [0.1, 0.1, 0],
    ]
    const runs = fixedRuns([tubeBody('K', path), tubeBody('I', path)], noFace)
    expect(runs.length).toBeGreaterThan(0)
    expect(Math.min(...runs.map(least))).toBe(0)
    for (const run of runs)
      for (const value of [...run.atA, ...run.atB, ...run.gap, ...run.pointB]) expect(value).not.toBeNaN()
  })

  it('that come near in two separate places make two runs, in one waving place one', () => {
    const straight = tubeBody('K', [
      [0, 0, 0],
      [0.4, 0, 0],
    ])
    const waving = (high: number) =>
      tubeBody('I', [
        [0, 0.02, 0],
        [0.2, high, 0],
        [0.4, 0.02, 0],
      ])
    // minima of 8 mm, cut above 1.5 × 8 + 5 = 17 mm
    expect(fixedRuns([straight, waving(0.0292)], noFace).filter((r) => least(r) < 0.009)).toHaveLength(2)
    expect(fixedRuns([straight, waving(0.0288)], noFace)).toHaveLength(1)
  })

  it('see the far leg of a hairpin as well as the near one', () => {
    const hairpin = tubeBody('I', [
      [0, 0.02, 0],
      [0.3, 0.02, 0],
      [0.3, 0.05, 0],
      [0, 0.05, 0],
    ])
    const straight = tubeBody('K', [
      [0, 0, 0],
      [0.31, 0, 0],
    ])
    const gaps = fixedRuns([straight, hairpin], noFace).filter(
      (run) =>
        run.b !== run.a &&
        run.a.kind === 'fixed' &&
        run.a.index !== (run.b.kind === 'fixed' ? run.b.index : -1),
    )
    const places = gaps.flatMap((run) => [...run.gap].map((gap, i) => [gap, run.pointB[3 * i + 1]] as const))
    expect(places.some(([gap, y]) => Math.abs(gap - 0.038) < 1e-9 && y === 0.05)).toBe(true)
    expect(places.some(([gap, y]) => Math.abs(gap - 0.008) < 1e-9 && y === 0.02)).toBe(true)
  })
})

describe('a tube with itself', () => {
  it('does not report its bend but reports the legs, from a path distance of thrice the axis distance', () => {
    const [run, ...more] = fixedRuns([tubeBody('U', arc(0.015, 24, 0.2))], noFace)
    expect(more).toEqual([])
    expect(run?.a).toEqual(run?.b)
    for (const gap of run!.gap) expect(gap).toBeCloseTo(0.018, 9)
    // on the legs at x = −(3 · 30 − π · 15)/2 mm the path through the bend is thrice the axis distance
    const start = Math.max(...run!.pointA.filter((_, i) => i % 3 === 0))
    expect(start).toBeLessThanOrEqual(-(0.09 - Math.PI * 0.015) / 2 + 1e-4)
    expect(start).toBeGreaterThan(-(0.09 - Math.PI * 0.015) / 2 - 0.0051)
    expect(run!.atA[0]).toBe(0)
  })

  it('bent to an open corner is continuous, bent to a sharp one meets itself', () => {
    const corner = (degrees: number) => {
      const half = (degrees / 2) * (Math.PI / 180)
      const leg = (sign: number): Point => [0.2 * Math.cos(half), sign * 0.2 * Math.sin(half), 0]
      return fixedRuns([tubeBody('V', [leg(-1), [0, 0, 0], leg(1)])], noFace)
    }
    // path over axis distance of foot and place is cot(half the angle): 3 at 36.87°
    expect(corner(60)).toEqual([])
    expect(corner(38)).toEqual([])
    expect(corner(36)).toHaveLength(1)
    expect(least(corner(36)[0]!)).toBe(0)
  })

  it('lists each pair of places once, the first further back', () => {
    for (const run of fixedRuns([tubeBody('U', arc(0.015, 24, 0.2))], noFace)) {
      for (const [i, s] of run.atA.entries()) expect(s).toBeLessThan(run.atB[i]!)
    }
  })

  it('straight or round makes no run', () => {
    const circle = Array.from(
      { length: 60 },
      (_, i): Point => [0.05 * Math.cos(i / 10), 0.05 * Math.sin(i / 10), 0],
    )
    expect(
      fixedRuns(
        [
          tubeBody('I', [
            [0, 0, 0],
            [0.5, 0, 0],
          ]),
        ],
        noFace,
      ),
    ).toEqual([])
    expect(fixedRuns([tubeBody('O', circle.slice(0, 45))], noFace)).toEqual([])
  })
})

describe('metal', () => {
  it('bars make runs with tubes, not with each other', () => {
    const bars = [
      barBody('x', [
        [0, 0, 0],
        [1, 0, 0],
      ]),
      barBody('y', [
        [0, 0, 0.01],
        [1, 0, 0.01],
      ]),
    ]
    expect(fixedRuns(bars, { face: { metal: 'grounded' } })).toEqual([])
    const runs = fixedRuns(
      [
        tubeBody('K', [
          [0, 0.03, 0],
          [1, 0.03, 0],
        ]),
        bars[0]!,
      ],
      noFace,
    )
    expect(runs).toHaveLength(1)
    expect(runs[0]).toMatchObject({ a: { index: 0 }, b: { index: 1 } })
    expect(least(runs[0]!)).toBeCloseTo(0.014, 12)
  })

  const faceOf = (face: Face, path: Point[]) => fixedRuns([tubeBody('K', path)], { face })
  it('counts a face of metal only, on either side of it', () => {
    const path: Point[] = [
      [0.1, 0.1, 0.04],
      [0.3, 0.1, 0.04],
    ]
    expect(faceOf({ metal: 'none' }, path)).toEqual([])
    for (const metal of ['grounded', 'floating'] as const) {
      for (const side of [1, -1]) {
        const [run] = faceOf(
          { metal, size: [0.9, 0.4] },
          path.map(([x, y, z]): Point => [x, y, side * z]),
        )
        expect(run?.b).toEqual({ kind: 'face' })
        expect(least(run!)).toBeCloseTo(0.034, 12)
        expect([...run!.pointB.slice(0, 3)]).toEqual([0.1, 0.1, 0])
        expect(run!.atB.every((t) => t === 0)).toBe(true)
      }
    }
  })

  it('measures to the rim beside the face, and has no rim without a size', () => {
    const beside: Point[] = [
      [0.93, -0.04, 0.005],
      [0.93, 0.5, 0.005],
    ]
    const [run] = faceOf({ metal: 'grounded', size: [0.9, 0.4] }, beside)
    expect(least(run!)).toBeCloseTo(Math.hypot(0.03, 0.005) - 0.006, 12)
    expect(run!.pointB[0]).toBe(0.9)
    expect(faceOf({ metal: 'grounded', size: [0.8, 0.4] }, beside)).toEqual([])
    expect(least(faceOf({ metal: 'grounded' }, beside)[0]!)).toBe(0)
  })

  it('finds where a tube dives through the face between stations', () => {
    const [run] = faceOf({ metal: 'grounded' }, [
      [0, 0, 0.0533],
      [0, 0, -0.0519],
    ])
    const k = run!.gap.indexOf(0)
    expect(k).toBeGreaterThan(0)
    expect(run!.gap.filter((gap) => gap === 0).length).toBeGreaterThanOrEqual(2)
    const touching = [...run!.atA].filter((_, i) => run!.gap[i] === 0)
    // within 6 mm of the sheet on both sides, to one step of 5 mm
    expect(Math.min(...touching)).toBeLessThan(0.0533)
    expect(Math.max(...touching)).toBeGreaterThan(0.0533)
  })
})

describe('a lead', () => {
  const glass = tubeBody('K', [
    [0, 0, 0.04],
    [0.3, 0, 0.04],
  ])

  it('that goes on straight from its tube is no pair with it', () => {
    const lead = leadOf(
      ['K.b', 'I.a'],
      [
        [0.3, 0, 0.04],
        [0.5, 0, 0.04],
      ],
    )
    expect(leadRuns(lead, [glass], noFace)).toEqual([])
    const stranger = leadOf(
      ['J.b', 'I.a'],
      [
        [0.3, 0, 0.04],
        [0.5, 0, 0.04],
      ],
    )
    expect(least(leadRuns(stranger, [glass], noFace)[0]!)).toBe(0)
  })

  it('that runs back along its tube is one, from where the path through the joint is over thrice the distance', () => {
    const lead = leadOf(
      ['K.b', 'I.a'],
      [
        [0.3, 0, 0.04],
        [0.3, 0, 0.02],
        [0, 0, 0.02],
      ],
    )
    const runs = leadRuns(lead, [glass], noFace).filter((run) => run.b.kind === 'fixed')
    expect(runs).toHaveLength(1)
    for (const gap of runs[0]!.gap) expect(gap).toBeCloseTo(0.0105, 12)
    // 20 mm of drop + 2 x > 60 mm
    const nearest = Math.max(...runs[0]!.pointA.filter((_, i) => i % 3 === 0))
    expect(nearest).toBeLessThan(0.28)
    expect(nearest).toBeGreaterThan(0.28 - 0.0101)
  })

  it('in metal conduit makes no run at all', () => {
    const path: Point[] = [
      [0, 0.01, 0.02],
      [0.3, 0.01, 0.02],
    ]
    const open = leadOf(['S1.1', 'I.a'], path)
    const shut = leadOf(['S1.1', 'I.a'], path, 'metal')
    const face = { face: { metal: 'grounded' as const } }
    expect(leadRuns(open, [glass], face).map((run) => run.b.kind)).toEqual(['fixed', 'face'])
    expect(leadRuns(shut, [glass], face)).toEqual([])
    expect(leadLeadRuns(open, open)).not.toEqual([])
    expect(leadLeadRuns(open, shut)).toEqual([])
    expect(leadLeadRuns(shut, open)).toEqual([])
  })

  it('doubling back passes itself', () => {
    const lead = leadOf(
      ['S1.1', 'I.a'],
      [
        [0, 0, 0.02],
        [0.3, 0, 0.02],
        [0.3, 0.03, 0.02],
        [0, 0.03, 0.02],
      ],
    )
    const runs = withLeadIndex(leadRuns(lead, [], noFace), 4)
    expect(runs).toHaveLength(1)
    expect(runs[0]).toMatchObject({ a: { kind: 'lead', index: 4 }, b: { kind: 'lead', index: 4 } })
    expect(least(runs[0]!)).toBeCloseTo(0.023, 12)
  })

  it('crossing another gives the same run from either', () => {
    const one = leadOf(
      ['S1.1', 'K.a'],
      [
        [0, 0, 0.02],
        [0.3, 0, 0.02],
      ],
    )
    const two = leadOf(
      ['S1.2', 'I.b'],
      [
        [0.1, -0.2, 0.04],
        [0.1, 0.2, 0.04],
      ],
    )
    const there = leadLeadRuns(one, two)
    const back = leadLeadRuns(two, one)
    expect(least(there[0]!)).toBeCloseTo(0.013, 12)
    expect(there).toHaveLength(1)
    expect(back).toHaveLength(1)
    expect([...back[0]!.gap]).toEqual([...there[0]!.gap])
    expect([...back[0]!.pointA]).toEqual([...there[0]!.pointB])
    expect(withLeadIndex(there, 2, 7)[0]).toMatchObject({ a: { index: 2 }, b: { index: 7 } })
  })

  it('joined to another at a tube end is no pair with it near that end', () => {
    const one = leadOf(
      ['S1.1', 'K.a'],
      [
        [0.2, 0, 0],
        [0, 0, 0],
      ],
    )
    const two = leadOf(
      ['K.a', 'I.b'],
      [
        [0, 0, 0],
        [0, 0.2, 0],
      ],
    )
    expect(leadLeadRuns(one, two)).toEqual([])
    const stranger = leadOf(
      ['J.a', 'I.b'],
      [
        [0, 0, 0],
        [0, 0.2, 0],
      ],
    )
    expect(leadLeadRuns(one, stranger)).not.toEqual([])
  })
})
