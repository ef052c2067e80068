import { readdirSync, readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import type { Layout, Wiring } from '../../src/layout/layout.js'
import { parseLayout } from '../../src/layout/parse.js'
import { noLoadVoltage } from '../../src/network/supplies.js'
import type { Edit, Sign } from '../../src/wiring/edit.js'
import {
  feedFromOtherEnd,
  joinEnds,
  moveFeed,
  shiftTube,
  swapTerminals,
  turnTube,
  withVariant,
} from '../../src/wiring/edits.js'
import { withSupply, withSupplyAt, withTubeFill, withTubeHeight } from '../../src/wiring/figure-edits.js'
import { holdsSign } from '../../src/wiring/same-sign.js'
import { editedText } from '../../src/wiring/text.js'
import { kiosk } from '../layout/kiosk.js'

function signOf(text: string): Sign {
  const { layout, problems } = parseLayout(text, 'sign.yaml')
  expect(problems).toEqual([])
  if (!layout) throw new Error('no layout')
  return { layout, wiring: layout.wiring }
}
const made = <T>(edit: Edit<T>): T => {
  if (!edit.ok) throw new Error(`refused: ${edit.why.code}`)
  return edit.value
}
const rewired = (sign: Sign, edit: (wiring: Wiring) => Edit<Wiring>): Sign => ({
  ...sign,
  wiring: made(edit(sign.wiring)),
})
const rebuilt = (sign: Sign, edit: (layout: Layout) => Edit<Layout>): Sign => ({
  ...sign,
  layout: made(edit(sign.layout)),
})

/** The edited text; it must read back as the edited sign. */
function edited(text: string, change: (sign: Sign) => Sign): string {
  const from = signOf(text)
  const to = change(from)
  const after = editedText(text, from, to)
  const read = parseLayout(after, 'sign.yaml')
  expect(read.problems).toEqual([])
  expect(read.layout && holdsSign(read.layout, to), after).toBe(true)
  return after
}

/** Lines taken out and put in, as `- old` and `+ new`. */
function changes(before: string, after: string): string[] {
  const [a, b] = [before.split('\n'), after.split('\n')]
  let [head, tail] = [0, 0]
  while (head < Math.min(a.length, b.length) && a[head] === b[head]) head++
  while (tail < Math.min(a.length, b.length) - head && a.at(-1 - tail) === b.at(-1 - tail)) tail++
  const cut = (lines: string[], sign: string) =>
    lines.slice(head, lines.length - tail).map((l) => `${sign} ${l}`)
  return [...cut(a, '-'), ...cut(b, '+')]
}

const kept = (name: string) => (sign: Sign) => ({
  ...sign,
  layout: withVariant(sign.layout, name, sign.wiring),
})

const small = `# first line
layout: 1
tubes:
  - {id: K, path: [[0, 0], [300, 0]]}   # the K
  - id: I		# a tab in a comment
    path: [[0, 50], [300, 50]]
supplies:
  - {id: S1, type: electronic, no_load_kv: 6.0, short_circuit_ma: 30, frequency_hz: 24000, grounding: midpoint}
circuits:
  - supply: S1   # the only one
    string: [K,   -I]     # wide
`

describe('an edit of the string', () => {
  test('changes the entries and nothing else', () => {
    expect(
      changes(
        small,
        edited(small, (s) => rewired(s, (w) => turnTube(w, 'K'))),
      ),
    ).toEqual(['-     string: [K,   -I]     # wide', '+     string: [-K,   -I]     # wide'])
  })

  test.each([
    ['a list of lines', 'string:\n      - K  # one\n      - -I\n', 'string:\n      - I  # one\n      - -K\n'],
    ['quoted ids', 'string: ["K", \'-I\']\n', 'string: [\'I\', "-K"]\n'],
    [
      'a line for each entry',
      'string: [\n      K,   # one\n      -I,\n    ]\n',
      'string: [\n      I,   # one\n      -K,\n    ]\n',
    ],
  ])('keeps %s', (_, form, after) => {
    const text = small.replace('string: [K,   -I]     # wide\n', form)
    const swapped = edited(text, (s) => rewired(s, (w) => swapTerminals(w, 0)))
    expect(swapped).toBe(text.replace(form, after))
    expect(edited(swapped, (s) => rewired(s, (w) => swapTerminals(w, 0)))).toBe(text)
  })

  test('quotes ids that YAML would take for something else, and whole numbers stay as they are', () => {
    const text = small
      .replace('id: K', 'id: "true"')
      .replace('id: I', 'id: 7')
      .replace('[K,   -I]', '["true", -7]')
    const turned = edited(text, (s) =>
      rewired(
        rewired(s, (w) => turnTube(w, 'true')),
        (w) => turnTube(w, '7'),
      ),
    )
    expect(turned).toContain('string: ["-true", 7]')
    expect(
      edited(text.replace('"true", -7', '-true, -7'), (s) => rewired(s, (w) => turnTube(w, 'true'))),
    ).toContain('string: ["true", -7]')
  })

  test('keeps CRLF line ends, a byte order mark and a missing last line end', () => {
    const text = `\ufeff${small.trimEnd().replaceAll('\n', '\r\n')}`
    expect(edited(text, (s) => rewired(s, (w) => turnTube(w, 'I')))).toBe(text.replace('-I]', 'I]'))
    const named = edited(text, kept('as found'))
    expect(named.slice(text.length)).toBe(
      '\r\nvariants:\r\n  - name: "as found"\r\n    circuits: [{supply: S1, string: [K, -I]}]',
    )
  })
})

describe('figures of supplies and tubes', () => {
  const lift = (id: string, metres: number) => (s: Sign) => rebuilt(s, (l) => withTubeHeight(l, id, metres))
  const place = (x: number, y: number) => (s: Sign) => rebuilt(s, (l) => withSupplyAt(l, 'S1', x, y))

  test('a key that is there gets a new value, others stand where the id stands', () => {
    expect(changes(small, edited(small, lift('K', 0.0555)))).toEqual([
      '-   - {id: K, path: [[0, 0], [300, 0]]}   # the K',
      '+   - {id: K, height: 55.5, path: [[0, 0], [300, 0]]}   # the K',
    ])
    const high = edited(small, lift('I', 0.03))
    expect(changes(small, high)).toEqual(['+     height: 30'])
    expect(high).toContain('id: I		# a tab in a comment\n    height: 30\n    path')
    expect(edited(high, lift('I', 0.031))).toBe(high.replace('height: 30', 'height: 31'))
  })

  test('the filling, in a block and on a line', () => {
    const fill = (id: string) => (s: Sign) => rebuilt(s, (l) => withTubeFill(l, id, 'argon-mercury'))
    expect(edited(small, fill('K'))).toContain('{id: K, fill: argon-mercury, path')
    expect(edited(small, fill('I'))).toContain('comment\n    fill: argon-mercury\n    path')
    expect(
      changes(
        kiosk,
        edited(kiosk, (s) => rebuilt(s, (l) => withTubeFill(l, 'I', 'neon'))),
      ),
    ).toEqual(['-     fill: argon-mercury', '+     fill: neon'])
  })

  test('all figures of a supply at once, those that were not there too', () => {
    const figures = {
      type: 'core-and-coil',
      grounding: 'one-end',
      noLoadVoltage: 7123.456,
      shortCircuitCurrent: 0.06,
      frequency: 50,
      ratedPower: 450,
      groundFaultTrip: 0.015,
      maxLead: 1.2,
    } as const
    expect(edited(small, (s) => rebuilt(s, (l) => withSupply(l, 'S1', figures)))).toContain(
      '{id: S1, rated_va: 450, ground_fault_trip_ma: 15, max_lead_mm: 1200, type: core-and-coil, no_load_kv: 7.123456, short_circuit_ma: 60, frequency_hz: 50, grounding: one-end}',
    )
  })

  test('another no-load voltage takes the stated peak along: nothing else of the file changes', () => {
    const volts = (noLoadVoltage: number) => (s: Sign) =>
      rebuilt(s, (l) => withSupply(l, 'S1', { noLoadVoltage }))
    const low = edited(kiosk, volts(6500))
    expect(low).toBe(kiosk.replace('    no_load_kv: 8\n    no_load_peak_kv: 12\n', '    no_load_kv: 6.5\n'))
    expect(signOf(low).layout.supplies.map(noLoadVoltage)).toEqual([6500])
    // above the old peak of 12 kV, which would make the file invalid
    expect(signOf(edited(kiosk, volts(13_000))).layout.supplies.map(noLoadVoltage)).toEqual([13_000])
    expect(edited(kiosk, volts(8000 * (1 + 1e-15)))).toBe(kiosk)

    const peaked = small.replace('no_load_kv: 6.0', 'no_load_kv: 6.0, no_load_peak_kv: 10')
    expect(edited(peaked, volts(4000))).toBe(small.replace('6.0', '4'))
    // undone after it was saved
    const [whole, without] = [signOf(kiosk), signOf(low)]
    const back = parseLayout(editedText(low, without, whole), 'sign.yaml')
    expect(back.layout && holdsSign(back.layout, whole)).toBe(true)
  })

  test('terminals that move keep their height; those that were assumed are written down', () => {
    expect(changes(kiosk, edited(kiosk, place(0.1, 0.2)))).toEqual([
      '-     terminals: [[400, 380, 30], [440, 380, 30]]',
      '+     terminals: [[80, 200, 30], [120, 200, 30]]',
    ])
    expect(edited(small, place(0.1, 0.2))).toMatch(
      /\{id: S1, terminals: \[\[[\d.]+, 200\], \[[\d.]+, 200\]\], type/,
    )
  })

  test('a second supply without a place keeps the one that was assumed for it', () => {
    const two = small
      .replace(
        'circuits:',
        '  - {id: S2, type: electronic, no_load_kv: 4, short_circuit_ma: 30, frequency_hz: 24000, grounding: midpoint}\ncircuits:',
      )
      .replace('[K,   -I]     # wide', '[K]\n  - {supply: S2, string: [I]}')
    expect(edited(two, place(0.1, 0.2)).match(/terminals:/g)?.length).toBe(2)
  })

  test('inches', () => {
    const inches = small.replace('layout: 1', 'layout: 1\nunits: in')
    expect(edited(inches, lift('K', 2.125 * 0.0254))).toContain('{id: K, height: 2.125, ')
    expect(edited(inches, place(2 * 0.0254, 3.5 * 0.0254))).toMatch(/terminals: \[\[[\d.]+, 3\.5\]/)
  })
})

describe('a variant that is kept', () => {
  const entry = (indent = '  ') =>
    `${indent}- name: new\n${indent}  circuits: [{supply: S1, string: [K, -I]}]\n`
  const flow = '{name: new, circuits: [{supply: S1, string: [K, -I]}]}'
  const old = '{name: old, circuits: [{supply: S1, string: [I, K]}]}'
  const cases: [string, string, string][] = [
    ['no key', '', `variants:\n${entry()}`],
    ['no key, a comment at the end', '# the end\n', `# the end\nvariants:\n${entry()}`],
    ['a block list', `variants:\n  - ${old}\n`, `variants:\n  - ${old}\n${entry()}`],
    ['a block list without indent', `variants:\n- ${old}\n`, `variants:\n- ${old}\n${entry('')}`],
    [
      'a block list with comments and more behind it',
      `variants:\n    - name: old\n      circuits:\n        - {supply: S1, string: [I, K]}   # tried\n\n# judged by\nrules: [common-practice]\n`,
      `variants:\n    - name: old\n      circuits:\n        - {supply: S1, string: [I, K]}   # tried\n${entry('    ')}\n# judged by\nrules: [common-practice]\n`,
    ],
    [
      'a block list at the end without line end',
      `variants:\n  - ${old}`,
      `variants:\n  - ${old}\n${entry().trimEnd()}`,
    ],
    ['a flow list', `variants: [${old}]   # so far\n`, `variants: [${old}, ${flow}]   # so far\n`],
    [
      'a flow list in lines',
      `variants: [\n  ${old},  # one\n]\n`,
      `variants: [\n  ${old}, ${flow},  # one\n]\n`,
    ],
    [
      'an empty list',
      'variants: []  # none\nrules: [common-practice]\n',
      `variants: [${flow}]  # none\nrules: [common-practice]\n`,
    ],
    ['a document with an end mark', '...\n# notes\n', `variants:\n${entry()}...\n# notes\n`],
  ]
  test.each(cases)('%s', (_, before, after) => {
    expect(edited(small + before, kept('new'))).toBe(small + after)
  })

  test('in a file that is one flow mapping', () => {
    const text =
      '{"layout": 1, "tubes": [{"id": "K", "path": [[0, 0], [300, 0]]}], "supplies": [{"id": "S1", "type": "electronic", "no_load_kv": 6, "short_circuit_ma": 30, "frequency_hz": 24000, "grounding": "none"}], "circuits": [{"supply": "S1", "string": ["K"]}]}'
    const named = edited(text, kept('new'))
    expect(named.startsWith(text.slice(0, -1))).toBe(true)
    expect(edited(named, (s) => rewired(s, (w) => turnTube(w, 'K')))).toBe(named.replace('["K"]', '["-K"]'))
  })

  test('in a file whose keys are indented', () => {
    const text = small.replace(/^(?=.)/gm, '  ')
    expect(edited(text, kept('new'))).toBe(`${text}${`variants:\n${entry()}`.replace(/^(?=.)/gm, '  ')}`)
  })

  test('over one of the same name, and beside it the wiring on screen', () => {
    const text = `${small}variants:\n  - ${old}\n`
    const over = edited(text, (s) => kept('old')(rewired(s, (w) => turnTube(w, 'K'))))
    expect(changes(text, over).length).toBe(2 * 3)
    expect(over).toContain('string: [-K,   -I]     # wide')
    expect(over).toContain('{name: old, circuits: [{supply: S1, string: [-K, -I]}]}')
  })

  test('with its way back to the midpoint and what was measured', () => {
    expect(edited(kiosk, kept('measured one'))).toContain(
      'circuits: [{supply: S1, string: [K, I, -O, S], midpoint_return: I.b, measured: {primary_w: 96, ma: {K.a: 28}}}]',
    )
  })

  test('under a name with blanks, quotes, capitals and signs', () => {
    for (const name of ['null', '7', '- x', 'a: b # c', "it's", '"quoted"', 'two  blanks', '\ttab', 'Ünï'])
      edited(small, kept(name))
  })
})

describe('switching to a variant', () => {
  const toVariant = (name: string) => (sign: Sign) => ({
    ...sign,
    wiring: { circuits: sign.layout.variants.find((v) => v.name === name)!.circuits },
  })

  test('without a midpoint return takes the key away, with its line', () => {
    const after = edited(kiosk, toVariant('feed behind the O'))
    expect(changes(kiosk, after).filter((l) => /return: I|measured|string: \[K/.test(l))).toEqual([
      '-     string: [K, I, -O, S]',
      '-     midpoint_return: I.b',
      '-     measured: {primary_w: 96, ma: {K.a: 28}}',
    ])
    const online = kiosk.replace(
      / {2}- supply: S1\n {4}string: [\s\S]*?(?=metal:)/,
      '  - {supply: S1, string: [K, I, -O, S], midpoint_return: I.b, measured: {primary_w: 96}}\n',
    )
    expect(edited(online, toVariant('feed behind the O'))).toMatch(
      / {2}- \{supply: S1, string: \[-O, S, K, I\],? ?\}\n/,
    )
  })

  const two = `${small.replace('circuits:', '  - {id: S2, type: electronic, no_load_kv: 4, short_circuit_ma: 30, frequency_hz: 24000, grounding: midpoint}\ncircuits:')}variants:
  - name: two supplies
    circuits:
      - {supply: S2, string: [I]}   # alone
      - {supply: S1, string: [K]}
`
  test('with other supplies and more circuits adds them', () => {
    const after = edited(two, toVariant('two supplies'))
    expect(after).toContain(
      '  - supply: S2   # the only one\n    string: [I]     # wide\n  - {supply: S1, string: [K]}\nvariants:',
    )
  })

  test('with fewer circuits is not written, rather than losing routes', () => {
    const after = edited(two, toVariant('two supplies'))
    const sign = signOf(after)
    const fewer: Sign = { ...sign, wiring: signOf(two).wiring }
    const read = parseLayout(editedText(after, sign, fewer), 'sign.yaml')
    expect(read.layout !== undefined && holdsSign(read.layout, fewer)).toBe(false)
  })

  test('kept under the name of one with other circuits', () => {
    const after = edited(two, kept('two supplies'))
    expect(after).toContain('    circuits:\n      - {supply: S1, string: [K, -I]}')
  })
})

describe('anchors and aliases', () => {
  const shared = small
    .replace('[K,   -I]     # wide', '&s [K, -I]')
    .concat('variants:\n  - {name: old, circuits: [{supply: S1, string: *s}]}\n')

  test('an edit that would reach further than its place does not read back', () => {
    const from = signOf(shared)
    const to = rewired(from, (w) => turnTube(w, 'K'))
    const read = parseLayout(editedText(shared, from, to), 'sign.yaml')
    expect(read.layout !== undefined && holdsSign(read.layout, to)).toBe(false)
  })

  test('one at an alias is written there', () => {
    const from = signOf(shared)
    const turned = made(turnTube(from.wiring, 'K'))
    const to: Sign = { ...from, layout: withVariant(from.layout, 'old', turned) }
    const after = editedText(shared, from, to)
    expect(after).toBe(shared.replace('*s', '[-K, -I]'))
  })
})

describe('any sequence of edits on the shipped signs', () => {
  const folder = new URL('../../layouts/', import.meta.url)
  const texts = readdirSync(folder)
    .filter((name) => name.endsWith('.yaml') && name !== 'bad-file.yaml')
    .map((name) => readFileSync(new URL(name, folder), 'utf8'))
  const signs = new Map(texts.map((text) => [text, signOf(text)]))
  type Pick = readonly [number, number, number]

  /** one edit of the wiring, by numbers; one that is refused changes nothing */
  function wiringEdit(sign: Sign, [kind, one, two]: Pick): Sign {
    const { wiring } = sign
    const circuit = one % wiring.circuits.length
    const { string, supply } = wiring.circuits[circuit]!
    const tube = string[two % string.length]!.tube
    const ends = [`${supply}.1`, `${supply}.2`, ...string.flatMap((e) => [`${e.tube}.a`, `${e.tube}.b`])]
    const edits: (() => Edit<Wiring>)[] = [
      () => moveFeed(wiring, circuit, two),
      () => feedFromOtherEnd(wiring, tube),
      () => turnTube(wiring, tube),
      () => swapTerminals(wiring, circuit),
      () => shiftTube(wiring, tube, one % 2 === 0 ? 1 : -1),
      () => joinEnds(wiring, ends[one % ends.length]!, ends[two % ends.length]!),
    ]
    const edit = edits[kind % edits.length]!()
    return edit.ok ? { ...sign, wiring: edit.value } : sign
  }

  function layoutEdit(sign: Sign, [kind, one, two]: Pick): Sign {
    const { layout } = sign
    const tube = layout.tubes[one % layout.tubes.length]!.id
    const supply = layout.supplies[one % layout.supplies.length]!.id
    const edits: (() => Edit<Layout>)[] = [
      () => withTubeHeight(layout, tube, (two % 2000) / 9999),
      () => withTubeFill(layout, tube, two % 2 === 0 ? 'neon-mercury' : 'neon'),
      () => withSupplyAt(layout, supply, (two % 1000) / 777, one / 3000),
      () =>
        withSupply(layout, supply, {
          noLoadVoltage: 1000 + (two % 9000) / 7,
          maxLead: 0.5 + (one % 100) / 300,
        }),
      () =>
        withSupply(layout, supply, {
          frequency: 50 + (two % 1000),
          type: 'core-and-coil',
          grounding: 'none',
        }),
      () => ({ ok: true, value: withVariant(layout, `try ${two % 3}`, sign.wiring) }),
    ]
    const edit = edits[kind % edits.length]!()
    return edit.ok ? { ...sign, layout: edit.value } : sign
  }

  const picks = fc.array(fc.tuple(fc.nat(1000), fc.nat(1000), fc.nat(10000)), { minLength: 1, maxLength: 8 })

  test('undone before it is saved changes nothing', () => {
    for (const [text, sign] of signs) expect(editedText(text, sign, { ...sign })).toBe(text)
  })

  test('reads back as the edited sign, and undone gives the same bytes', () => {
    fc.assert(
      fc.property(fc.constantFrom(...texts), picks, fc.boolean(), (text, sequence, wiringOnly) => {
        const from = signs.get(text)!
        const to = sequence.reduce(
          (sign, pick) => (wiringOnly || pick[0] % 2 === 0 ? wiringEdit(sign, pick) : layoutEdit(sign, pick)),
          from,
        )
        const after = editedText(text, from, to)
        const { layout, problems } = parseLayout(after, 'sign.yaml')
        expect(problems).toEqual([])
        expect(layout && holdsSign(layout, to), after).toBe(true)
        // undone after it was saved: figures and keys that were put in stay, the wiring goes back byte by byte
        const returns = (sign: Sign) => sign.wiring.circuits.map((c) => c.midpointReturn).join()
        if (wiringOnly && returns(to) === returns(from)) expect(editedText(after, to, from)).toBe(text)
      }),
      { numRuns: 300 },
    )
  }, 30_000)
})
