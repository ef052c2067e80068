/** A full layout in SI units, and what is taken where a layout says nothing. */
import { describe, expect, it } from 'vitest'
import type { Layout, PathPoint } from '../../src/layout/layout.js'
import { parseLayout } from '../../src/layout/parse.js'
import { kiosk } from './kiosk.js'

function layoutOf(text: string, file = 'signs/sign.yaml'): Layout {
  const { layout, problems } = parseLayout(text, file)
  expect(problems).toEqual([])
  if (!layout) throw new Error('no layout')
  return layout
}

const lengthOf = (path: readonly PathPoint[]): number =>
  path.slice(1).reduce((sum, p, i) => sum + Math.hypot(p.x - path[i]!.x, p.y - path[i]!.y), 0)

describe('the full example', () => {
  const layout = layoutOf(kiosk)
  const tube = (id: string) => layout.tubes.find((t) => t.id === id)!

  it('has its title, face, place and rules', () => {
    expect(layout).toMatchObject({
      title: 'Harbour Kiosk, window sign',
      units: 'mm',
      altitude: 0,
      face: { metal: 'grounded', size: [0.9, 0.4] },
      rules: ['common-practice', 'nec-600'],
    })
  })
  it('has tubes with the defaults of the file and their own keys, in metres', () => {
    const { path: _path, ...figures } = tube('K')
    expect(figures).toEqual({
      id: 'K',
      height: 0.04,
      diameter: 0.012,
      wall: 0.001,
      permittivity: 7.1,
      fill: 'neon',
      boots: false,
    })
    expect(tube('I')).toMatchObject({ height: 0.035, permittivity: 6.65, fill: 'argon-mercury', boots: true })
    expect(tube('O')).toMatchObject({ diameter: 0.015, wall: 0.0011 })
  })
  it('has paths of the right length', () => {
    expect(lengthOf(tube('K').path)).toBeCloseTo(0.24 + 0.26, 12)
    // 140 mm down and half a circle of 40 mm; 0.05 mm chords shorten a bend of 40 mm by less than 0.05 %
    expect(lengthOf(tube('I').path) / (0.14 + 0.04 * Math.PI)).toBeCloseTo(1, 3)
    expect(tube('S').path[2]).toEqual({ x: 0.56, y: 0.18, z: expect.closeTo(0.052, 12) })
  })
  it('has the supply with every figure', () => {
    expect(layout.supplies).toEqual([
      {
        id: 'S1',
        type: 'electronic',
        noLoadVoltage: 8000,
        noLoadPeak: 12_000,
        shortCircuitCurrent: 0.03,
        frequency: 24_000,
        grounding: 'midpoint',
        ratedPower: 150,
        openCircuitProtection: true,
        groundFaultTrip: 0.015,
        maxLead: 0.9,
        chart: [
          { fill: 'neon', diameter: 0.012, length: 6.5 },
          { fill: 'neon', diameter: 0.015, length: 8 },
        ],
        terminals: [
          { x: 0.4, y: 0.38, z: 0.03 },
          { x: 0.44, y: 0.38, z: 0.03 },
        ],
      },
    ])
  })
  it('has the string, the joint to the midpoint and what was measured', () => {
    expect(layout.wiring.circuits).toEqual([
      {
        supply: 'S1',
        string: [
          { tube: 'K', reversed: false },
          { tube: 'I', reversed: false },
          { tube: 'O', reversed: true },
          { tube: 'S', reversed: false },
        ],
        midpointReturn: 'I.b',
        measured: { primaryPower: 96, currents: new Map([['K.a', 0.028]]) },
      },
    ])
    expect(
      layout.variants.map(({ name, circuits }) => [name, circuits[0]?.string.map((e) => e.tube)]),
    ).toEqual([['feed behind the O', ['O', 'S', 'K', 'I']]])
  })
  it('has the library of routes', () => {
    expect(layout.lead).toEqual({ conductor: 0.0012, diameter: 0.007, permittivity: 3, height: 0.02 })
    expect(layout.routes).toEqual([
      {
        between: ['S1.1', 'K.a'],
        path: [
          { x: 0.4, y: 0.38 },
          { x: 0.06, y: 0.38 },
          { x: 0.06, y: 0.06 },
        ],
        height: 0.008,
        conduit: 'none',
      },
      { between: ['I.b', 'O.b'], conduit: 'metal', bore: 0.016 },
    ])
  })
  it('has bar, plate and wall', () => {
    expect(layout.metal).toMatchObject([
      { kind: 'bar', id: 'frame', grounded: true, diameter: 0.02, height: 0.01 },
      {
        kind: 'plate',
        id: 'backplate',
        grounded: false,
        height: 0,
        corners: [
          { x: 0.3, y: 0.1 },
          { x: 0.6, y: 0.3 },
        ],
      },
      { kind: 'wall', id: 'return', grounded: true, from: 0, to: 0.09 },
    ])
    expect(layout.metal[0]).toHaveProperty('path.length', 5)
  })
  it('assumes only what it leaves open', () => {
    expect(layout.assumed).toEqual([
      { about: 'K, O, S', text: 'no insulating boots on the electrode connections' },
      { about: 'S1.1–K.a', text: 'not in conduit' },
    ])
  })
})

const bare = `layout: 1
tubes: [{id: A, path: [[0, 0], [200, 0]]}, {id: B, path: [[0, 80], [200, 80]], diameter: 15}]
supplies: [{id: S, type: core-and-coil, no_load_kv: 9, short_circuit_ma: 30, frequency_hz: 50, grounding: one-end}]
circuits: [{supply: S, string: [A, -B], leads: [{between: [A.b, B.b], conduit: metal}]}]
`

describe('what a layout leaves open', () => {
  const layout = layoutOf(bare)

  it('is taken on the cautious side', () => {
    expect(layout.tubes[0]).toMatchObject({
      diameter: 0.012,
      wall: 0.001,
      permittivity: 7.1,
      fill: 'neon',
      height: 0.04,
      boots: false,
    })
    // 1.1 mm is the wall usual for 15 mm (from memory)
    expect(layout.tubes[1]?.wall).toBeCloseTo(0.0011, 12)
    expect(layout.supplies[0]).toMatchObject({ openCircuitProtection: false })
    expect(layout.supplies[0]).not.toHaveProperty('groundFaultTrip')
    expect(layout).toMatchObject({
      title: 'sign',
      face: { metal: 'none' },
      rules: ['common-practice'],
      units: 'mm',
    })
  })
  it('is listed, every bit of it, in plain words', () => {
    expect(layout.assumed.map(({ about, text }) => `${about}: ${text}`)).toEqual([
      'lengths: taken as millimetres',
      'altitude: taken as sea level',
      'face: no metal sheet at z = 0',
      'A: outer diameter 12 mm',
      'A: glass wall 1 mm, usual for 12 mm tube',
      'all tubes: soda-lime glass',
      'all tubes: neon filling',
      'all tubes: centre-line 40 mm in front of the face',
      'all tubes: no insulating boots on the electrode connections',
      'B: glass wall 1.1 mm, usual for 15 mm tube',
      'leads: wire 1.2 mm thick',
      'leads: outer diameter 7 mm',
      'leads: silicone insulation',
      'leads: run 20 mm in front of the face',
      'S: terminals at the middle of the lower edge of the sign, 40 mm apart',
      'S: no open-circuit protection',
      'S: no ground-fault protection',
      'A.b–B.b: inside diameter of the conduit 16 mm',
      'rules: common-practice alone',
    ])
  })
  it('puts terminals at the middle of the lower edge: of the face where it has a size, else of the glass', () => {
    expect(layout.supplies[0]?.terminals).toEqual([
      { x: expect.closeTo(0.08, 12), y: 0.08 },
      { x: expect.closeTo(0.12, 12), y: 0.08 },
    ])
    const faced = layoutOf(`face: {size: [600, 300], metal: floating}\n${bare}`)
    expect(faced.supplies[0]?.terminals.map(({ x, y }) => [x, y])).toEqual([
      [expect.closeTo(0.28, 12), expect.closeTo(0.3, 12)],
      [expect.closeTo(0.32, 12), expect.closeTo(0.3, 12)],
    ])
  })
  it('keeps two supplies without places apart', () => {
    const two = bare
      .replace(
        'supplies: [',
        'supplies: [{id: T, type: electronic, no_load_kv: 9, short_circuit_ma: 30, frequency_hz: 20000, grounding: none}, ',
      )
      .replace(
        'string: [A, -B], leads: [{between: [A.b, B.b], conduit: metal}]}',
        'string: [A]}, {supply: T, string: [B]}',
      )
    const xs = layoutOf(two).supplies.flatMap(({ terminals }) => terminals.map(({ x }) => x))
    const sorted = [...xs].sort((a, b) => a - b)
    expect(Math.min(...sorted.slice(1).map((x, i) => x - sorted[i]!))).toBeGreaterThan(0.039)
  })
  it('says nothing of a height where every point has its own', () => {
    const high = layoutOf(bare.replace('[[0, 0], [200, 0]]', '[[0, 0, 30], [200, 0, 30]]'))
    expect(high.assumed.find(({ text }) => text.startsWith('centre-line'))?.about).toBe('B')
  })
})

describe('the same sign written in another way is the same layout', () => {
  const same = (text: string) => expect(layoutOf(text)).toEqual(layoutOf(bare))

  it('with CRLF, a byte order mark, comments and a document start', () => {
    same(bare.replaceAll('\n', '\r\n'))
    same(`\ufeff---\n# note\n${bare}...\n`)
  })
  it('in JSON', () =>
    same(
      JSON.stringify({
        layout: 1,
        tubes: [
          {
            id: 'A',
            path: [
              [0, 0],
              [200, 0],
            ],
          },
          {
            id: 'B',
            path: [
              [0, 80],
              [200, 80],
            ],
            diameter: 15,
          },
        ],
        supplies: [
          {
            id: 'S',
            type: 'core-and-coil',
            no_load_kv: 9,
            short_circuit_ma: 30,
            frequency_hz: 50,
            grounding: 'one-end',
          },
        ],
        circuits: [
          { supply: 'S', string: ['A', '-B'], leads: [{ between: ['A.b', 'B.b'], conduit: 'metal' }] },
        ],
      }),
    ))
  it('with other number forms, anchors and aliases', () => {
    same(bare.replace('[200, 0]', '[2e2, 0.0]').replace('[200, 80]', '[0xc8, +80]'))
    same(
      bare
        .replace('path: [[0, 0], [200, 0]]', 'path: [&o [0, 0], &w [200, 0]]')
        .replace('[[0, 0], [200, 0]]', '[*o, *w]'),
    )
    same(bare.replace('diameter: 15', 'diameter: &d 15').replace('frequency_hz: 50', 'frequency_hz: 50'))
  })
  it('in inches: lengths of the drawing scale, kV, mA and max_lead_mm do not', () => {
    const inches = layoutOf(
      bare
        .replace('layout: 1', 'layout: 1\nunits: in')
        .replace(/\b200\b/g, String(200 / 25.4))
        .replace(/\b80\b/g, String(80 / 25.4))
        .replace('diameter: 15', `diameter: ${15 / 25.4}`)
        .replace('grounding: one-end', 'grounding: one-end, max_lead_mm: 900'),
    )
    const millimetres = layoutOf(bare)
    expect(inches.tubes.map((t) => t.path)).toEqual(
      millimetres.tubes.map((t) =>
        t.path.map(({ x, y }) => ({ x: expect.closeTo(x, 12), y: expect.closeTo(y, 12) })),
      ),
    )
    expect(inches.tubes[1]?.diameter).toBeCloseTo(0.015, 12)
    expect(inches.lead).toEqual(millimetres.lead)
    expect(inches.supplies[0]).toMatchObject({ noLoadVoltage: 9000, maxLead: 0.9 })
  })
  it('flattens as finely in inches as in millimetres', () => {
    const arc = (unit: string, r: number) =>
      layoutOf(
        bare
          .replace('layout: 1', `layout: 1\nunits: ${unit}`)
          .replace('[[0, 0], [200, 0]]', `"M 0 0 A ${r} ${r} 0 0 1 ${2 * r} 0"`)
          .replace(/\[\[0, 80.*?\]\], diameter: 15/, `[[0, ${r}], [1, ${r}]]`),
      ).tubes[0]!.path.length
    expect(arc('in', 100 / 25.4)).toBe(arc('mm', 100))
  })
})

describe('names', () => {
  it('may be whole numbers, and -0 enters tube 0 at b', () => {
    const numbered = layoutOf(
      bare
        .replace('id: A', 'id: 0')
        .replace('id: B', 'id: 7')
        .replace('[A, -B]', '[-0, -7]')
        .replace('[A.b, B.b]', '[0.b, 7.b]'),
    )
    expect(numbered.tubes.map(({ id }) => id)).toEqual(['0', '7'])
    expect(numbered.wiring.circuits[0]?.string).toEqual([
      { tube: '0', reversed: true },
      { tube: '7', reversed: true },
    ])
  })
  it('titles and names of variants lose control characters', () => {
    const layout = layoutOf(
      `${bare}title: "Bar \\e[31m\\u202eOpen\\a"\nvariants: [{name: "other\\e way", circuits: [{supply: S, string: [B, A]}]}]\n`,
    )
    expect(layout.title).toBe('Bar [31m Open')
    expect(layout.variants[0]?.name).toBe('other way')
  })
  it('a raw escape in a title is cleaned as well', () =>
    expect(layoutOf(`${bare}title: a\u001b[2Jb\n`).title).toBe('a [2Jb'))
  it('of glass and insulation stand for permittivities, numbers for themselves (from memory: 6.65, 4.6; 2.3)', () => {
    const layout = layoutOf(
      `${bare.replace('id: A,', 'id: A, glass: borosilicate,').replace('id: B,', 'id: B, glass: 5.5,')}defaults: {lead: {insulation: polyethylene}}\n`,
    )
    expect(layout.tubes.map(({ permittivity }) => permittivity)).toEqual([4.6, 5.5])
    expect(layout.lead.permittivity).toBe(2.3)
  })
})
