import { describe, expect, it } from 'vitest'
import { equivalentRadius, fixedBodies } from '../../src/geometry/bodies.js'
import { layoutOf, tube } from './signs.js'

describe('fixed bodies', () => {
  const layout = layoutOf({
    tubes: [
      tube('K', [
        { x: 0, y: 0 },
        { x: 0.3, y: 0, z: 0.05 },
      ]),
      tube('I', [
        { x: 0, y: 0.1 },
        { x: 0.3, y: 0.1 },
      ]),
    ],
    metal: [
      {
        kind: 'bar',
        id: 'rail',
        grounded: false,
        path: [
          { x: 0, y: 0 },
          { x: 1, y: 0 },
        ],
        height: 0.01,
        diameter: 0.02,
      },
      {
        kind: 'plate',
        id: 'plate',
        grounded: true,
        corners: [
          { x: 0, y: 0 },
          { x: 1, y: 1 },
        ],
        height: 0,
      },
    ],
  })
  const bodies = fixedBodies(layout)

  it('are the tubes in layout order, then the bars', () => {
    expect(bodies.map((body) => [body.kind, body.name])).toEqual([
      ['tube', 'K'],
      ['tube', 'I'],
      ['bar', 'rail'],
    ])
  })

  it('lie at their own height where the path has no z', () => {
    expect([...bodies[0]!.line.points]).toEqual([0, 0, 0.04, 0.3, 0, 0.05])
    expect([...bodies[2]!.line.points]).toEqual([0, 0, 0.01, 1, 0, 0.01])
  })

  it('have the bore as core, and bare metal as itself', () => {
    expect(bodies[0]!.coreRadius).toBeCloseTo(0.005, 12)
    expect(bodies[0]!.outerRadius).toBeCloseTo(0.006, 12)
    expect(bodies[2]).toMatchObject({
      coreRadius: 0.01,
      outerRadius: 0.01,
      equivalentRadius: 0.01,
      permittivity: 1,
      grounded: false,
    })
  })

  it('have the equivalent radius with the same series capacitance as the shell', () => {
    // shell ln(b/a)/εr in series with the outside ln(R/b) equals ln(R/a_eq), exact
    const shell = Math.log(6 / 5) / 7.1 + Math.log(50 / 6)
    expect(Math.log(50 / (1000 * equivalentRadius(0.005, 0.006, 7.1)))).toBeCloseTo(shell, 12)
    expect(equivalentRadius(0.004, 0.004, 3)).toBe(0.004)
  })
})
