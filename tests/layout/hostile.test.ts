/** No text makes the parser throw, hang or give a layout with a number that is none. */
import fc from 'fast-check'
import { expect, it } from 'vitest'
import { parseLayout } from '../../src/layout/parse.js'
import { problemText } from '../../src/layout/problem-text.js'
import { kiosk } from './kiosk.js'

/** All numbers in a value, maps included. */
function numbersIn(value: unknown): number[] {
  if (typeof value === 'number') return [value]
  if (value instanceof Map) return [...value.values()].flatMap(numbersIn)
  return typeof value === 'object' && value !== null ? Object.values(value).flatMap(numbersIn) : []
}

function holds(text: string): 'layout' | 'problems' {
  const { layout, problems } = parseLayout(text, 'sign.yaml')
  expect(layout === undefined).toBe(problems.length > 0)
  let last = 0
  for (const problem of problems) {
    // an internal problem is a bug of ours, caught
    expect(problem.code, JSON.stringify(problem)).not.toBe('internal')
    expect(problem.place.offset).toBeGreaterThanOrEqual(last)
    expect(problem.place.offset).toBeLessThanOrEqual(text.length)
    last = problem.place.offset
    expect(problemText(problem, 'sign.yaml', text)).not.toMatch(/[\0-\x09\x0b-\x1f\x7f-\x9f]/)
  }
  if (!layout) return 'problems'
  expect(numbersIn(layout).every(Number.isFinite)).toBe(true)
  return 'layout'
}

it('arbitrary text', () => {
  const text = fc.oneof(fc.string({ unit: 'binary' }), fc.string({ unit: 'grapheme' }), fc.json())
  fc.assert(
    fc.property(text, (t) => {
      holds(t)
      holds(`layout: 1\n${t}`)
    }),
    { numRuns: 500, seed: 3 },
  )
})

const scraps = [
  '{',
  '}',
  '[',
  ']',
  ',',
  ':',
  '- ',
  '-',
  '"',
  "'",
  '#',
  '&a ',
  '*a',
  '!t ',
  '|',
  '>',
  '%',
  '?',
  '\t',
  '\r',
  '\n',
  ' ',
  '.nan',
  '.inf',
  '-.inf',
  '1e999',
  '-1',
  '0',
  '1e9',
  '1e-300',
  'null',
  '~',
  'true',
  '"M 0 0"',
  'M 0 0 L 9e9 9',
  '[]',
  '{}',
  '[[0, 0], [0, 0]]',
  '\u001b',
  '\u0000',
  '\u202e',
  '\ud800',
  '__proto__',
  'constructor',
  'K',
  'S1',
  'K.a',
  '<<: ',
  '---\n',
]

it('a valid layout with pieces put in, taken out or replaced', () => {
  const edit = fc.record({
    at: fc.nat(kiosk.length),
    take: fc.nat(3),
    put: fc.oneof(
      fc.constantFrom(...scraps),
      fc.constantFrom('1', '5', ' ', '-'),
      fc.string({ maxLength: 5, unit: 'binary' }),
    ),
  })
  const seen = { layout: 0, problems: 0 }
  fc.assert(
    fc.property(fc.array(edit, { minLength: 1, maxLength: 2 }), (edits) => {
      const text = edits.reduce((t, { at, take, put }) => t.slice(0, at) + put + t.slice(at + take), kiosk)
      seen[holds(text)]++
    }),
    { numRuns: 250, seed: 5 },
  )
  // both outcomes were really met
  expect(Math.min(seen.layout, seen.problems)).toBeGreaterThan(5)
})

it('a valid layout with single words replaced by other values', () => {
  const words = [...kiosk.matchAll(/[\w.+-]+|"[^"]*"/g)].map((m) => [m.index, m[0].length] as const)
  const seen = { layout: 0, problems: 0 }
  fc.assert(
    fc.property(fc.constantFrom(...words), fc.constantFrom(...scraps), ([at, length], put) => {
      seen[holds(kiosk.slice(0, at) + put + kiosk.slice(at + length))]++
    }),
    { numRuns: 250, seed: 9 },
  )
  expect(Math.min(seen.layout, seen.problems)).toBeGreaterThan(5)
})

it('a layout cut off anywhere', () => {
  for (let end = 0; end < kiosk.length; end += 37) holds(kiosk.slice(0, end))
})

it('nests, alias bombs and long lists are refused without reading them out', () => {
  for (const open of ['[', '{a: ', '- ', '? ', '[{a: ']) expect(holds(open.repeat(400_000))).toBe('problems')
  const level = (name: string, of: string) => `${name}: &${name} [${`*${of},`.repeat(9)}]\n`
  const names = 'bcdefghijklmnopqrstuvwxyz'.split('')
  const bomb = `a: &a [x,x,x]\n${names.map((name, i) => level(name, i === 0 ? 'a' : names[i - 1]!)).join('')}`
  expect(holds(bomb)).toBe('problems')
  expect(holds(`layout: 1\n${Array.from({ length: 5000 }, (_, i) => `k${i}: 1`).join('\n')}`)).toBe(
    'problems',
  )
})
