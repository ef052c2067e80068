/**
 * Every kind of problem, at its place. A text carries the mark ‸ where a problem is expected; the mark is taken out
 * before parsing. Each text may have no problems but those.
 */
import { describe, expect, it } from 'vitest'
import { parseLayout } from '../../src/layout/parse.js'
import { problemText } from '../../src/layout/problem-text.js'
import type { Facts } from '../../src/layout/problems.js'

const base = `layout: 1
units: mm
face: {metal: none}
tubes:
  - {id: K, path: [[0, 0], [100, 0]]}
  - {id: I, path: [[0, 50], [100, 50]]}
  - {id: O, path: [[0, 90], [100, 90]]}
supplies:
  - {id: S1, type: electronic, no_load_kv: 8, short_circuit_ma: 30, frequency_hz: 24000, grounding: midpoint}
circuits:
  - {supply: S1, string: [K, I, -O]}
`

/** The base with these replacements, each of which must apply. */
function changed(...changes: [string, string][]): string {
  let text = base
  for (const [from, to] of changes) {
    expect(text.split(from), from).toHaveLength(2)
    text = text.replace(from, () => to)
  }
  return text
}
const added = (text: string) => base + text
const tubeK = (text: string) => changed(['{id: K, path: [[0, 0], [100, 0]]}', text])
const supply = (text: string) => changed(['grounding: midpoint}', `grounding: midpoint, ${text}}`])
const circuit = (text: string) => changed(['-O]}', `-O], ${text}}`])
const lead = (text: string) => circuit(`leads: [${text}]`)
const many = (count: number, of: (i: number) => string) =>
  Array.from({ length: count }, (_, i) => of(i)).join('')

const second =
  '  - {id: S2, type: core-and-coil, no_load_kv: 9, short_circuit_ma: 30, frequency_hz: 50, grounding: none}\ncircuits:'

const cases: Record<Exclude<Facts['code'], 'internal'>, string[]> = {
  'file-too-big': [`‸# ${'x'.repeat(5_000_000)}`, `‸# ${'é'.repeat(2_500_000)}`],
  'unreadable-character': [added('# a ‸\0 b'), '‸\u001f'],
  'too-deep': [
    `a: ${'['.repeat(63)}‸[${'['.repeat(1_000_000)}`,
    `${'- '.repeat(64)}‸${'- '.repeat(900_000)}1`,
  ],
  yaml: [
    added('metal: [‸'),
    added('metal:\n‸\t- {}'),
    'a: ‸}\n',
    added('title: ‸!mine x\n'),
    added('title: "a‸\\q"\n'),
    added('? ‸[a]\n: b\n'),
  ],
  'several-documents': [added('‸---\nlayout: 1\n')],
  'yaml-version': [`‸%YAML 1.1\n---\n${base}`],
  'empty-file': ['‸', '‸# nothing here\n', '‸---\n'],
  'duplicate-key': [
    changed(['units: mm', 'units: mm\n‸units: mm']),
    tubeK('{id: K, path: [[0, 0], [100, 0]], ‸id: K}'),
    added('\ntitle: a\n"‸title": b\n').replace('"‸', '‸"'),
  ],
  'unknown-alias': [added('title: ‸*name\n'), added('title: ‸*a\nmetal: &a []\n')],
  'alias-in-itself': [added('metal: &a [‸*a]\n')],
  'too-many-aliases': [
    `‸a: &a [1,1,1,1,1,1,1,1,1,1]\n${many(9, (i) => `${'bcdefghij'[i]}: &${'bcdefghij'[i]} [${many(10, () => `*${'abcdefghi'[i]},`)}]\n`)}`,
    `‸a: &a 1\nb: [${many(10_001, () => '*a,')}]`,
  ],
  'format-version': ['layout: ‸2\nfuture: yes\n', 'layout: ‸1.5\n', changed(['layout: 1', 'layout: ‸"1"'])],
  'missing-key': [
    changed(['layout: 1\n', ''], ['units: mm', '‸units: mm']),
    changed(['units: mm', ''])
      .replace(/circuits:[\s\S]*/, '')
      .replace('layout', '‸layout'),
    changed(['{metal: none}', '‸{size: [10, 10]}']),
    tubeK('‸{id: K}'),
    changed(['  - {id: S1, type: electronic,', '  - ‸{id: S1,']),
    changed(['frequency_hz: 24000, ', ''], ['{id: S1', '‸{id: S1']),
    changed([', grounding: midpoint', ''], ['{id: S1', '‸{id: S1']),
    changed(['no_load_kv: 8, ', ''], ['{id: S1', '‸{id: S1']),
    changed(['short_circuit_ma: 30, ', ''], ['{id: S1', '‸{id: S1']),
    added('metal:\n  - ‸id: a\n    path: [[0, 0], [9, 9]]\n'),
    added('metal: [‸{id: a, grounded: true, wall: [[0, 0], [9, 9]]}]\n'),
    lead('‸{height: 3}'),
    added('variants: [‸{circuits: [{supply: S1, string: [K, I, O]}]}]\n'),
  ],
  'unknown-key': [
    added('‸titel: x\n'),
    tubeK('{id: K, path: [[0, 0], [100, 0]], ‸diametr: 3, ‸zzz: 4}'),
    changed(['{metal: none}', '{metal: none, ‸sise: [1, 2]}']),
    added('defaults: {‸tubes: {}, lead: {‸boots: true}}\n'),
    supply('‸ma: 3'),
    lead('{between: [K.b, I.a], ‸between_: 3}'),
    circuit('‸strings: []'),
    circuit('measured: {‸kv: 3}'),
    added('metal: [{id: m, path: [[0, 0], [9, 9]], grounded: true, ‸from: 3}]\n'),
    added('variants: [{name: v, circuits: [{supply: S1, string: [K, I, O], ‸leads: []}]}]\n'),
    added('‸__proto__: {}\n'),
    added('‸<<: {}\n'),
  ],
  'wrong-form': [
    '‸- 1\n',
    '‸text',
    tubeK('{id: K, path: [[0, 0], [100, 0]], height: ‸"12 mm"}'),
    tubeK('{id: K, path: [[0, 0], [100, 0]], height: ‸.nan}'),
    tubeK('{id: K, path: [[0, 0], [100, 0]], height: ‸-.inf}'),
    tubeK('{id: K, path: [[0, 0], [100, 0]], glass: ‸.nan}'),
    tubeK('{id: K, path: [[0, 0], [100, 0]], height:‸ }').replace(':‸ }', ':‸}'),
    tubeK('{id: K, path: [[0, 0], [100, 0]], boots: ‸yes}'),
    tubeK('{id: K, path: [[0, ‸x], ‸[100]]}'),
    tubeK('{id: K, path: [[0, 0], ‸[1, 2, 3, 4]]}'),
    tubeK('{id: K, path: [‸1, ‸2]}'),
    tubeK('{id: K, path: ‸7}'),
    tubeK('{id: ‸[K], path: [[0, 0], [1, 1]]}').replace('string: [K, ', 'string: ['),
    supply('terminals: ‸[[0, 0]]'),
    supply('chart_m: ‸3'),
    supply('chart_m: {neon-12: ‸x}'),
    lead('{between: ‸[K.a]}'),
    lead('{between: ‸K.a}'),
    changed(['{metal: none}', '{metal: none, size: ‸[100]}']),
    added('metal: [{id: p, grounded: true, plate: [[0, 0], ‸[1, 2, 3]]}]\n'),
    added('metal: ‸{}\n'),
    added('metal: [‸7]\n'),
    added('rules: ‸nec-600\n'),
    added('rules: [‸600]\n'),
    added('variants: ‸x\n'),
    changed(['tubes:\n', 'tubes: ‸7\nfoo:\n'])
      .replace(/foo:\n(.*\n){3}/, '')
      .replace('[K, I, -O]', '[]')
      .replace('string: []', 'string: ‸x'),
  ],
  'not-a-choice': [
    changed(['units: mm', 'units: ‸cm']),
    changed(['metal: none', 'metal: ‸ground']),
    changed(['electronic', '‸elektronic']),
    changed(['midpoint', '‸middle']),
    tubeK('{id: K, path: [[0, 0], [100, 0]], fill: ‸argon, glass: ‸leed}'),
    lead('{between: [K.b, I.a], conduit: ‸true, insulation: ‸rubber}'),
  ],
  'empty-list': [
    changed(['string: [K, I, -O]', 'string: ‸[]']),
    changed(['circuits:\n  - {supply: S1, string: [K, I, -O]}', 'circuits: ‸[]']),
    added('rules: ‸[]\n'),
    added('variants: [{name: v, circuits: ‸[]}]\n'),
  ],
  'too-many-tubes': [
    `layout: 1\ntubes:\n  ‸${many(2001, (i) => `- {id: T${i}, path: [[0, 0], [9, 9]]}\n  `)}`,
  ],
  'too-many-points': [
    tubeK(`{id: K, path: ‸"M 0 0 ${many(9, () => 'A 9e8 9e8 0 0 1 9e8 9e8 A 9e8 9e8 0 0 1 0 0 ')}"}`),
    // eleven uses of one list of 20,000 points
    changed(
      ['path: [[0, 0], [100, 0]]', `path: &long ‸[${many(20_000, (i) => `[0,${i % 2}],`)}]`],
      ['-O]}', `-O], leads: [${many(10, () => '{between: [K.b, I.a], path: *long}, ')}]}`],
    ),
  ],
  'out-of-range': [
    tubeK('{id: K, path: [[0, 0], [100, 0]], wall: ‸-1}'),
    tubeK('{id: K, path: [[0, 0], [100, 0]], diameter: ‸500, height: ‸1e6, glass: ‸0.5}'),
    tubeK('{id: K, path: [[0, 0], ‸[1e12, 0]]}'),
    tubeK('{id: K, path: [[0, 0], ‸[1, -1e9]]}'),
    tubeK('{id: K, path: [[0, 0], ‸[1, 1, 20000]]}'),
    tubeK('{id: K, path: ‸"M 0 0 L 1e12 0"}'),
    changed(['no_load_kv: 8', 'no_load_kv: ‸8000']),
    changed(['short_circuit_ma: 30', 'short_circuit_ma: ‸0']),
    changed(['frequency_hz: 24000', 'frequency_hz: ‸24']).replace('‸24,', '‸2,'),
    supply('rated_va: ‸-1, ground_fault_trip_ma: ‸0, max_lead_mm: ‸0, chart_m: {neon-12: ‸-6}'),
    supply('terminals: [[0, 0], ‸[1e12, 0]]'),
    added('altitude_m: ‸99999\n'),
    added('defaults: {tube: {diameter: ‸1e9}, lead: {insulation: ‸80}}\n'),
    changed(['{metal: none}', '{metal: none, size: [100, ‸-5]}']),
    circuit('measured: {primary_w: ‸-3, ma: {K.a: ‸0}}'),
    lead('{between: [K.b, I.a], bore: ‸5000, conduit: metal}'),
    added('metal: [{id: m, path: [[0, 0], [9, 9]], grounded: true, diameter: ‸0}]\n'),
    added('metal: [{id: m, plate: [‸[1e12, 0], [9, 9]], grounded: true}]\n'),
    changed(['units: mm', 'units: in']).replace('100, 0', '‸1e6, 0').replace('[‸', '‸['),
  ],
  'not-below': [
    tubeK('{id: K, path: [[0, 0], [100, 0]], diameter: 12, wall: ‸6}'),
    tubeK('{id: K, path: [[0, 0], [100, 0]], wall: ‸6.5}'),
    `${tubeK('{id: K, path: [[0, 0], [100, 0]], diameter: ‸5}')}defaults: {tube: {wall: 3}}\n`,
    added('defaults: {tube: {diameter: 5, wall: ‸3}, lead: {conductor: ‸8, diameter: 7}}\n'),
    lead('{between: [K.b, I.a], conductor: ‸7.5}'),
    lead('{between: [K.b, I.a], conduit: metal, bore: ‸6}'),
    supply('no_load_peak_kv: ‸7.5'),
    added('metal: [{id: m, wall: [[0, 0], [9, 9]], grounded: true, from: ‸50, to: 50}]\n'),
    added('metal: [{id: m, wall: [[0, 0], [9, 9]], grounded: true, to: ‸-5}]\n'),
  ],
  'short-path': [
    tubeK('{id: K, path: ‸[[1, 2]]}'),
    tubeK('{id: K, path: ‸[]}'),
    tubeK('{id: K, path: ‸"M 1 2"}'),
    lead('{between: [K.b, I.a], path: ‸[[1, 2]]}'),
    added('metal: [{id: m, path: ‸[[0, 0]], grounded: true}, {id: w, wall: ‸[], to: 9, grounded: true}]\n'),
  ],
  'no-length': [tubeK('{id: K, path: ‸[[5, 5], [5, 5]]}'), tubeK('{id: K, path: ‸"M 5 5 L 5 5"}')],
  'tube-too-long': [tubeK('{id: K, path: ‸[[0, 0], [60000, 0]]}')],
  'path-data': [
    tubeK('{id: K, path: "M 0 0 L 10 ‸x"}'),
    tubeK("{id: K, path: 'M 0 0 ‸W 1 1'}"),
    tubeK('{id: K, path: M 0 0 ‸W 1 1}'),
    tubeK('{id: K, path: ‸"M 0 0\\u0020W 1 1"}'),
    tubeK('{id: K, path: "‸"}'),
  ],
  'path-data-too-long': [tubeK(`{id: K, path: ‸"M 0 0 ${many(20_000, () => 'L 1 1 ')}"}`)],
  'path-data-not-finite': [tubeK('{id: K, path: ‸"M 0 0 L 1e999 0"}')],
  'several-subpaths': [tubeK('{id: K, path: ‸"M 0 0 L 5 5 M 9 9 L 12 12"}')],
  'metal-kind': [
    added('metal: [‸{id: m, grounded: true}]\n'),
    added('metal: [‸{id: m, grounded: true, path: [[0, 0], [9, 9]], plate: [[0, 0], [9, 9]]}]\n'),
  ],
  'no-area': [added('metal: [{id: m, plate: ‸[[0, 0], [9, 0]], grounded: true}]\n')],
  'same-place': [supply('terminals: ‸[[4, 4, 4], [4, 4, 4]]')],
  'bad-id': [
    added('metal: [{id: ‸"a\\e[31mb", path: [[0, 0], [9, 9]], grounded: true}]\n'),
    added('metal: [{id: ‸"a\\u202eb", path: [[0, 0], [9, 9]], grounded: true}]\n'),
    added('metal: [{id: ‸-m, path: [[0, 0], [9, 9]], grounded: true}]\n'),
    added('metal: [{id: ‸" ", path: [[0, 0], [9, 9]], grounded: true}]\n'),
    added('metal: [{id: ‸"m ", path: [[0, 0], [9, 9]], grounded: true}]\n'),
    added('metal: [{id: ‸a–b, path: [[0, 0], [9, 9]], grounded: true}]\n'),
    added('metal: [{id: ‸face, path: [[0, 0], [9, 9]], grounded: true}]\n'),
    added(`metal: [{id: ‸${'m'.repeat(41)}, path: [[0, 0], [9, 9]], grounded: true}]\n`),
  ],
  'bad-name': [
    added('rules: [‸"nec\\e[0m", ‸" "]\n'),
    added(`title: ‸${'t'.repeat(201)}\n`),
    added('variants: [{name: ‸"\\e", circuits: [{supply: S1, string: [K, I, O]}]}]\n'),
  ],
  'duplicate-id': [
    changed(['{id: I,', '{id: ‸K,'], ['[K, I, -O]', '[K, -O]']),
    added(
      'metal: [{id: ‸S1, path: [[0, 0], [9, 9]], grounded: true}, {id: ‸K, plate: [[0, 0], [9, 9]], grounded: true}]\n',
    ),
  ],
  'duplicate-name': [
    added(
      'variants: [{name: v, circuits: [{supply: S1, string: [K, I, O]}]}, {name: ‸v, circuits: [{supply: S1, string: [O, K, I]}]}]\n',
    ),
  ],
  'unknown-id': [
    changed(['[K, I, -O]', '[K, I, -O, ‸Z]']),
    changed(['[K, I, -O]', '[‸k, I, -O]']),
    changed(['[K, I, -O]', '[K, I, -O, ‸S1]']),
    changed(['supply: S1', 'supply: ‸S2']),
    changed(['supply: S1', 'supply: ‸K']),
    added('variants: [{name: v, circuits: [{supply: S1, string: [K, ‸i, O]}]}]\n'),
  ],
  'bad-end': [
    lead('{between: [‸K, ‸I.c]}'),
    lead('{between: [‸S1.3, ‸X.a]}'),
    circuit('midpoint_return: ‸I.q'),
    circuit('measured: {ma: {‸K.z: 20}}'),
  ],
  'tube-used-twice': [
    changed(['[K, I, -O]', '[K, I, -O, ‸-K]']),
    added('variants: [{name: v, circuits: [{supply: S1, string: [K, I, O, ‸I]}]}]\n'),
  ],
  'tube-unused': [
    changed(['[K, I, -O]', '[K, -O]'], ['{id: I,', '{id: ‸I,']),
    added('variants: [{name: v, ‸circuits: [{supply: S1, string: [K, I]}]}]\n'),
  ],
  'supply-used-twice': [changed(['string: [K, I, -O]}', 'string: [K]}\n  - {supply: ‸S1, string: [I, O]}'])],
  'never-joined': [
    lead('{between: ‸[K.a, K.b]}'),
    lead('{between: ‸[S1.1, S1.2]}'),
    changed(['circuits:', second], ['-O]}', '-O], leads: [{between: ‸[S1.1, S2.1]}]}']),
  ],
  'duplicate-route': [lead('{between: [K.b, I.a]}, {between: ‸[I.a, K.b]}')],
  'not-in-circuit': [
    changed(
      ['circuits:', second],
      [
        '[K, I, -O]}',
        '[K, I], midpoint_return: ‸O.a, measured: {ma: {‸O.a: 20, I.b: 20}}}\n  - {supply: S2, string: [O]}',
      ],
    ),
  ],
  'no-joint': [
    circuit('midpoint_return: ‸K.a'),
    circuit('midpoint_return: ‸O.a'),
    circuit('midpoint_return: ‸S1.1'),
  ],
  'no-midpoint': [
    changed(['midpoint', 'one-end'], ['-O]}', '-O], midpoint_return: ‸K.b}']),
    changed(['midpoint', 'none'], ['-O]}', '-O], midpoint_return: ‸I.a}']),
  ],
  'bad-chart-key': [supply('chart_m: {‸neon: 3, neon-12: 6, ‸helium-12: 6}')],
}

const marks = (text: string): number[] => [...text.matchAll(/‸/g)].map(({ index }, i) => index - i)

describe.each(Object.entries(cases))('%s', (code, texts) => {
  it.each(texts.map((text, i) => [i + 1, text] as const))('case %i', (_number, text) => {
    const source = text.replaceAll('‸', '')
    const { layout, problems } = parseLayout(source, 'sign.yaml')
    expect(layout).toBeUndefined()
    expect(problems.map((problem) => [problem.code, problem.place.offset])).toEqual(
      marks(text).map((offset) => [code, offset]),
    )
    for (const problem of problems) {
      const { offset, line, column } = problem.place
      const before = source.slice(0, offset).split('\n')
      expect([line, column]).toEqual([before.length, (before.at(-1)?.length ?? 0) + 1])
      const shown = problemText(problem, 'sign.yaml', source)
      expect(shown.split('\n')).toHaveLength(3)
      expect(shown).toMatch(/^sign\.yaml:\d+:\d+: .+, (expected .+|did you mean ".+"\?)\n/)
      expect(shown).not.toMatch(/[\0-\x09\x0b-\x1f\x7f-\x9f\u202a-\u202e]/)
    }
  })
})

it('the base has no problems', () => expect(parseLayout(base, 'sign.yaml').problems).toEqual([]))

describe('the text of a problem', () => {
  const shown = (source: string, file = 'sign.yaml') =>
    parseLayout(source, file).problems.map((problem) => problemText(problem, file, source))

  it('is the place, what is wrong, what was expected, the source line and a caret', () => {
    expect(shown(tubeK('{id: K, path: [[0, 0], [100, 0]], diametr: 3, wall: -1}'))).toEqual([
      `sign.yaml:5:39: unknown key "diametr", did you mean "diameter"?
  - {id: K, path: [[0, 0], [100, 0]], diametr: 3, wall: -1}
                                      ^`,
      `sign.yaml:5:57: wall is -1 mm, expected 0.1 to 10 mm
  - {id: K, path: [[0, 0], [100, 0]], diametr: 3, wall: -1}
                                                        ^`,
    ])
    expect(shown(changed([', grounding: midpoint', ''], ['[K, I, -O]', '[K, l, -O]']))).toEqual([
      `sign.yaml:6:10: tube "I" is in no string of the wiring, expected every tube once
  - {id: I, path: [[0, 50], [100, 50]]}
         ^`,
      `sign.yaml:9:5: this supply has no grounding, expected one of midpoint, one-end, none
  - {id: S1, type: electronic, no_load_kv: 8, short_circuit_ma: 30, frequency_hz: 24000}
    ^`,
      `sign.yaml:11:30: there is no tube "l", expected one of K, I, O
  - {supply: S1, string: [K, l, -O]}
                             ^`,
    ])
  })
  it('gives bounds in the units of the file', () => {
    const inches = tubeK('{id: K, path: [[0, 0], [100, 0]], diameter: 40}').replace('units: mm', 'units: in')
    expect(shown(inches)[0]).toMatch('5:49: diameter is 40 in, expected 0.11811 to 3.93701 in\n')
  })
  it('cuts a long line around the caret', () => {
    const source = tubeK(
      `{id: K, path: [[0, 0], [100, 0]], ${many(40, () => ' '.repeat(20))}wall: -1, ${many(40, () => ' '.repeat(20))}}`,
    )
    const [, line = '', caret = ''] = (shown(source)[0] ?? '').split('\n')
    expect(line).toHaveLength(102)
    expect(line.slice(caret.length - 1)).toMatch(/^-1, /)
  })
  it('keeps the caret under its place behind wide characters, tabs and escapes', () => {
    const source = changed(['{supply: S1, ', '{supply: S1, ‸'.replace('‸', '')]).replace(
      '{metal: none}',
      '{"看板": 1,\t"\\e\u0007": 1, metal: none}',
    )
    expect(shown(source)).toEqual([
      `sign.yaml:3:8: unknown key "看板", expected one of size, metal
face: {"看板": 1, "\\e\\x07": 1, metal: none}
       ^`,
      `sign.yaml:3:17: unknown key "\\x1b\\x07", expected one of size, metal
face: {"看板": 1, "\\e\\x07": 1, metal: none}
                  ^`,
    ])
  })
  it('lets nothing of a file or its name reach the terminal', () => {
    const source = added('\u001b[2J\u009b31m: "\u001b]0;x\u0007"\n')
    for (const text of shown(source, 'a\u001b[31m.yaml')) {
      expect(text).not.toMatch(/[\0-\x09\x0b-\x1f\x7f-\x9f]/)
      expect(text).toMatch(/^a\\x1b\[31m\.yaml:12:1: /)
    }
  })
  it('counts lines over CRLF and a byte order mark', () => {
    const windows = `\ufeff${tubeK('{id: K, path: [[0, 0], [100, 0]], wall: -1}').replaceAll('\n', '\r\n')}`
    expect(shown(windows)).toEqual([
      'sign.yaml:5:45: wall is -1 mm, expected 0.1 to 10 mm\n  - {id: K, path: [[0, 0], [100, 0]], wall: -1}\n                                            ^',
    ])
    const first = '\ufefflayout: 1.5\r\n'
    expect(shown(first)).toEqual([
      'sign.yaml:1:9: layout is 1.5, expected 1, the only format this version reads\nlayout: 1.5\n        ^',
    ])
  })
  it('shows a fault behind an alias once, where it is written', () => {
    const source = added('defaults: {tube: &t {wall: -1}}\n')
      .replace('K, path: [[0, 0], [100, 0]]}', 'K, path: [[0, 0], [100, 0]], height: *h}')
      .replace('face: ', 'altitude_m: &h 99999\nface: ')
    expect(parseLayout(source, 'x').problems.map(({ code, place }) => [code, place.line])).toEqual([
      ['out-of-range', 3],
      ['out-of-range', 3],
      ['out-of-range', 13],
    ])
  })
})

it('problems of all stages come together, in file order', () => {
  const source = changed(
    ['units: mm', 'unitz: mm'],
    ['{metal: none}', '{}'],
    ['[[0, 0], [100, 0]]', '"M 0 0 X"'],
    ['[[0, 50], [100, 50]]', '[[0, 50]]'],
    ['no_load_kv: 8', 'no_load_kv: -8'],
    ['[K, I, -O]', '[K, K, I, -Q]'],
  )
  const { problems } = parseLayout(source, 'sign.yaml')
  expect(problems.map(({ code }) => code)).toEqual([
    'unknown-key',
    'missing-key',
    'path-data',
    'short-path',
    'tube-unused',
    'out-of-range',
    'tube-used-twice',
    'unknown-id',
  ])
})
