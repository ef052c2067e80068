import { describe, expect, it } from 'vitest'
import { endPoint, leadBody } from '../../src/geometry/leads.js'
import type { Layout, Route } from '../../src/layout/layout.js'
import { layoutOf, tube } from './signs.js'

const supply: Layout['supplies'][number] = {
  id: 'S1',
  type: 'electronic',
  noLoadVoltage: 8000,
  shortCircuitCurrent: 0.03,
  frequency: 24000,
  grounding: 'midpoint',
  openCircuitProtection: true,
  chart: [],
  terminals: [
    { x: 0.4, y: 0.38, z: 0.03 },
    { x: 0.44, y: 0.38 },
  ],
}
const sign = (routes: readonly Route[] = []): Layout =>
  layoutOf({
    tubes: [
      tube('K', [
        { x: 0.06, y: 0.06 },
        { x: 0.06, y: 0.3 },
      ]),
      tube('no.2', [
        { x: 0.2, y: 0.06 },
        { x: 0.2, y: 0.3, z: 0.035 },
      ]),
    ],
    supplies: [supply],
    routes,
  })
const drawn: Route = {
  between: ['S1.1', 'K.a'],
  path: [
    { x: 0.4, y: 0.38 },
    { x: 0.06, y: 0.38 },
    { x: 0.06, y: 0.06 },
  ],
  height: 0.008,
  conduit: 'none',
}

describe('ends', () => {
  it('are electrodes of tubes and terminals of supplies', () => {
    expect(endPoint(sign(), 'K.a')).toEqual([0.06, 0.06, 0.04])
    expect(endPoint(sign(), 'no.2.b')).toEqual([0.2, 0.3, 0.035])
    expect(endPoint(sign(), 'S1.1')).toEqual([0.4, 0.38, 0.03])
  })
  it('of a terminal without z lie at the height of the leads', () => {
    expect(endPoint(sign(), 'S1.2')).toEqual([0.44, 0.38, 0.02])
  })
  it('that the layout does not have are a bug', () => {
    for (const end of ['X.a', 'K.c', 'S1.3', 'K', '']) expect(() => endPoint(sign(), end)).toThrow(/no end/)
  })
})

describe('a drawn lead', () => {
  it('begins and ends at the ends it joins: drops to its height are part of it', () => {
    const lead = leadBody(sign([drawn]), ['S1.1', 'K.a'])
    expect(lead.name).toBe('S1.1–K.a')
    expect(lead.assumed).toBe(false)
    // 22 mm down, 340 + 320 mm across, 32 mm up
    expect(lead.line.length).toBeCloseTo(0.022 + 0.34 + 0.32 + 0.032, 12)
    expect([...lead.line.points.slice(0, 3)]).toEqual([0.4, 0.38, 0.03])
    expect([...lead.line.points.slice(-3)]).toEqual([0.06, 0.06, 0.04])
  })
  it('named the other way round is the same path reversed', () => {
    const there = leadBody(sign([drawn]), ['S1.1', 'K.a'])
    const back = leadBody(sign([drawn]), ['K.a', 'S1.1'])
    expect(back.name).toBe('K.a–S1.1')
    expect(back.line.length).toBeCloseTo(there.line.length, 12)
    const corners = (points: Float64Array) =>
      Array.from({ length: points.length / 3 }, (_, i) => points.slice(3 * i, 3 * i + 3))
    expect(corners(back.line.points)).toEqual(corners(there.line.points).reverse())
  })
  it('that already reaches its ends gets no further corner', () => {
    const exact: Route = {
      between: ['K.a', 'no.2.b'],
      path: [
        { x: 0.06, y: 0.06, z: 0.04 },
        { x: 0.2, y: 0.3, z: 0.035 },
      ],
      conduit: 'none',
    }
    expect(leadBody(sign([exact]), ['K.a', 'no.2.b']).line.at.length).toBe(2)
  })
  it('uses what the route overrides, and half the bore', () => {
    const route: Route = {
      ...drawn,
      conduit: 'metal',
      bore: 0.016,
      conductor: 0.002,
      diameter: 0.01,
      permittivity: 2.3,
    }
    const lead = leadBody(sign([route]), ['S1.1', 'K.a'])
    expect(lead).toMatchObject({
      conduit: 'metal',
      boreRadius: 0.008,
      coreRadius: 0.001,
      outerRadius: 0.005,
      permittivity: 2.3,
    })
    expect(lead.equivalentRadius).toBeCloseTo(0.005 * 0.2 ** (1 / 2.3), 15)
    expect('boreRadius' in leadBody(sign([drawn]), ['S1.1', 'K.a'])).toBe(false)
  })
})

describe('an output lead that changes terminals', () => {
  it('stays where it lies, in its conduit, and only its end moves to the other terminal', () => {
    const routed: Route = { ...drawn, conduit: 'metal', bore: 0.016 }
    const before = leadBody(sign([routed]), ['S1.1', 'K.a'])
    const after = leadBody(sign([routed]), ['S1.2', 'K.a'])
    expect(after.conduit).toBe('metal')
    expect(after.assumed).toBe(false)
    expect(Array.from(after.line.points.slice(-9))).toEqual(Array.from(before.line.points.slice(-9)))
    expect(Array.from(after.line.points.slice(0, 3))).toEqual([0.44, 0.38, 0.02])
    // told from the tube it is the same way back
    const back = leadBody(sign([routed]), ['K.a', 'S1.2'])
    expect(back.line.length).toBeCloseTo(after.line.length, 12)
  })
})

describe('an assumed lead', () => {
  it('goes straight to its height at each end, then straight across', () => {
    const lead = leadBody(sign(), ['K.b', 'no.2.b'])
    expect(lead.assumed).toBe(true)
    expect([...lead.line.points]).toEqual([0.06, 0.3, 0.04, 0.06, 0.3, 0.02, 0.2, 0.3, 0.02, 0.2, 0.3, 0.035])
  })
  it('keeps the conduit and height of a route that has no path', () => {
    const route: Route = { between: ['no.2.b', 'K.b'], conduit: 'nonmetallic', height: 0.01 }
    const lead = leadBody(sign([route]), ['K.b', 'no.2.b'])
    expect(lead).toMatchObject({ assumed: true, conduit: 'nonmetallic' })
    expect(lead.line.points[5]).toBe(0.01)
  })
})
