import { describe, expect, test } from 'vitest'
import { parseRuleSet } from '../../src/rules/parse-rules.js'
import { ruleTemplate } from '../../src/rules/sets/template.js'
import { shopText } from './signs.js'

/** `line:column sentence` of every problem; the caret stands under that column of that line. */
function problemsOf(text: string): string[] {
  const { set, problems, texts } = parseRuleSet(text, 'shop.yaml')
  if (problems.length > 0) expect(set).toBeUndefined()
  const lines = text.split('\n')
  return texts.map((one) => {
    const [head = '', source = '', caret = ''] = one.split('\n')
    const [, line = '', column = '', sentence = ''] = /^shop\.yaml:(\d+):(\d+): (.*)$/.exec(head) ?? []
    expect(source).toBe(lines[Number(line) - 1])
    expect(caret).toBe(`${' '.repeat(Number(column) - 1)}^`)
    return `${line}:${column} ${sentence}`
  })
}

describe('a sound file', () => {
  test('the template parses as it stands and shows every key of the format', () => {
    const { set, texts } = parseRuleSet(ruleTemplate, 'our-shop.yaml')
    expect(texts).toEqual([])
    expect(set?.rules.map((r) => r.kind)).toEqual([
      ...['pair', 'pair', 'pair', 'pair', 'pair', 'pair', 'pair'],
      ...['circuit', 'circuit', 'required', 'remark'],
    ])
    for (const key of [
      ...[
        'clause',
        'advice',
        'between',
        'and',
        'by',
        'distance_mm',
        'table_kv_mm',
        'interpolation',
        'beyond',
      ],
      ...['altitude_factor', 'from', 'when', 'limit', 'requires', 'source', 'mark', 'supply', 'grounding'],
      ...['frequency_hz', 'no_load_kv', 'terminal_kv', 'conduit', 'fill', 'circuits', 'kv', 'metal_mm'],
      ...['quantity', 'at_most', 'by_terminal_kv', 'verdict', 'condition', 'value', 'of', 'times'],
    ])
      expect(ruleTemplate, key).toMatch(new RegExp(`\\b${key}:`))
  })

  test('figures become SI and what is not said takes its default', () => {
    const { set } = parseRuleSet(
      shopText(`- clause: 12
  between: [glass]
  and: [metal, lead]
  when: {kv: {above: 2}, metal_mm: {up_to: 50}}
  table_kv_mm: [[1, 2], [3, 8]]
- clause: b
  limit: {quantity: residual-ma, at_most: 12}`),
      'shop.yaml',
    )
    expect(set?.rules).toEqual([
      {
        kind: 'pair',
        clause: '12',
        mark: 'own',
        advice: '',
        when: {
          voltage: { above: 2000, upTo: Infinity },
          metal: { above: -Infinity, upTo: 0.05 },
        },
        sides: [2, 128 + 16],
        by: { condition: 'nameplate', value: 'rms', of: 'difference', times: 1 },
        distance: {
          voltages: [1000, 3000],
          distances: [0.002, 0.008],
          interpolation: 'linear',
          beyond: 'slope',
        },
        altitude: [],
        fromConduit: false,
      },
      {
        kind: 'circuit',
        clause: 'b',
        mark: 'own',
        advice: '',
        when: {},
        quantity: 'residual-ma',
        atMost: 0.012,
        verdict: 'fix',
      },
    ])
  })
})

describe('every fault is told with its line, column and caret', () => {
  test('several faults at once, in file order', () => {
    const text = `rule_set: 2
id: Our Shop
title: ""
edition: "1"
sorce: nobody
mark: X
rules:
  - clause: a
    between: [tubee]
    distance_mm: wide
  - clause: b
    between: [tube]
    distance_mm: -3
    limit: {quantity: chart-shere, at_most: 1}
  - advice: nameless
    interpolation: step
`
    expect(problemsOf(text)).toEqual([
      '1:1 the file has no source, expected text',
      '1:11 rule_set is 2, expected 1, the only format this version reads',
      '2:5 the id "Our Shop" cannot be used, expected lower-case letters, digits and dashes, as our-shop',
      '3:8 title is empty, expected a name',
      '5:1 unknown key "sorce", did you mean "source"?',
      '6:7 mark is the text "X", expected one of R, S, S2, M, practice, own',
      '9:15 between, entry 1 is the text "tubee", did you mean "tube"?',
      '10:18 distance_mm is the text "wide", expected a number, without quotes or unit',
      '13:18 distance_mm is -3 mm, expected 0 to 10000 mm',
      '14:5 the rule has distance_mm and limit, expected one of them',
      '14:23 quantity is the text "chart-shere", did you mean "chart-share"?',
      '15:5 this rule has no clause, expected text',
      '16:5 interpolation makes sense only with table_kv_mm, expected both or neither',
    ])
  })

  test.each([
    ['empty text', '', ['1:1 the file is empty, expected a rule set that begins with rule_set: 1']],
    ['a list', '- 1\n', ['1:1 the file is a list, expected keys and values (rule_set, id, title, rules, …)']],
    [
      'two documents',
      `${shopText('- clause: a')}---\nid: b\n`,
      ['9:1 another document begins here, expected one rule set in a file'],
    ],
    [
      'bad YAML',
      'rule_set: 1\nrules: [a\n',
      [
        '3:1 flow sequence in block collection must be sufficiently indented and end with a ], expected YAML 1.2',
      ],
    ],
  ])('%s', (_, text, expected) => {
    expect(problemsOf(text)).toEqual(expected)
  })

  // ^ stands before each place that a caret has to point at
  test.each([
    [
      'a table that falls',
      'between: [tube], table_kv_mm: [[1, 5], [^1, ^4]]',
      [
        'the first number of row 2 of table_kv_mm is 1, expected more than 1, the row before',
        'the second number of row 2 of table_kv_mm is 4, expected no less than 5, the row before',
      ],
    ],
    [
      'a row of one number',
      'between: [tube], table_kv_mm: [^[1]]',
      ['table_kv_mm, entry 1 is a list, expected two numbers, as [2, 2.2]'],
    ],
    [
      'an empty range',
      'when: {frequency_hz: ^{}}',
      ['frequency_hz is an empty range, expected above, up_to or both'],
    ],
    [
      'a range upside down',
      'when: {no_load_kv: ^{above: 9, up_to: 3}}',
      ['no_load_kv is above 9 and up to 3, expected a range that rises'],
    ],
    [
      'a condition of pairs on a circuit',
      'when: {^kv: {above: 1}}, limit: {quantity: load, at_most: 1}',
      ['kv makes sense only with between, expected both or neither'],
    ],
    [
      'a limit without a figure',
      'limit: ^{quantity: load}',
      ['the limit has no figure or two, expected one of at_most and by_terminal_kv'],
    ],
    [
      'a limit that rises with voltage',
      'limit: {quantity: lead-m, by_terminal_kv: [[0, 5], [2, ^9]]}',
      ['the second number of row 2 of by_terminal_kv is 9, expected no more than 5, the row before'],
    ],
    [
      'a distance between nothing',
      '^distance_mm: 4',
      ['distance_mm makes sense only with between, expected both or neither'],
    ],
    [
      'parts without a distance',
      '^between: [tube]',
      ['between makes sense only with distance_mm or table_kv_mm, expected both or neither'],
    ],
    [
      'a number that is none',
      'between: [tube], distance_mm: ^.nan',
      ['distance_mm is NaN, which is no finite number, expected a number, without quotes or unit'],
    ],
    [
      'a control character',
      'advice: ^"ring \\a"',
      ['advice holds control or invisible characters, expected printable text'],
    ],
    ['an unknown condition', 'when: {^suply: electronic}', ['unknown key "suply", did you mean "supply"?']],
  ])('%s', (_, marked, sentences) => {
    const head = '  - {clause: a, '
    const marks = [...marked.matchAll(/\^/g)].map(({ index }, i) => head.length + index - i + 1)
    const text = shopText(`- {clause: a, ${marked.replaceAll('^', '')}}`)
    const line = text.split('\n').findIndex((one) => one.startsWith(head)) + 1
    expect(problemsOf(text)).toEqual(sentences.map((sentence, i) => `${line}:${marks[i]} ${sentence}`))
  })

  test('no text of the file reaches the complaint as a control character', () => {
    const { texts } = parseRuleSet(
      shopText('- {clause: a, between: ["\\e[31mred"], distance_mm: 4}'),
      'shop.yaml',
    )
    expect(texts.join('')).not.toMatch(/[\0-\x09\x0b-\x1f]/)
    expect(texts).toHaveLength(1)
  })
})

test('whatever is cut off a sound file, the rest is read or refused in words', () => {
  for (let length = 0; length < ruleTemplate.length; length += 37) {
    const { set, texts } = parseRuleSet(ruleTemplate.slice(0, length), 'cut.yaml')
    expect(set !== undefined || texts.length > 0).toBe(true)
    expect(texts.join('\n')).not.toContain('could not be read')
  }
})
