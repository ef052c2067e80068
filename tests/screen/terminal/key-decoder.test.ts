import { describe, expect, test } from 'vitest'
import { keyDecoder } from '../../../src/screen/terminal/key-decoder.js'
import { keyName } from '../../../src/screen/terminal/key-names.js'

/** Names of the keys and texts of the pastes that these reads hold, and what stays held back. */
function decoded(...reads: (string | Uint8Array)[]) {
  const decoder = keyDecoder()
  const strokes = reads.flatMap((read) => decoder.push(read))
  return strokes.map((stroke) => (stroke.kind === 'key' ? stroke.name : { paste: stroke.text }))
}

describe('keys', () => {
  test('one read may hold many', () => {
    expect(decoded('\x1b[B\x1b[Bjé\r\t')).toEqual(['down', 'down', 'j', 'é', 'enter', 'tab'])
  })

  test('one key may come in many reads', () => {
    expect(decoded('\x1b', '[', '5', '~')).toEqual(['pageup'])
    expect(decoded('\x1b', 'O', 'A')).toEqual(['up'])
    const e = Buffer.from('é世')
    expect(decoded(e.subarray(0, 1), e.subarray(1, 3), e.subarray(3))).toEqual(['é', '世'])
  })

  test('Escape is held until it is known to be alone', () => {
    const decoder = keyDecoder()
    expect(decoder.push('\x1b')).toEqual([])
    expect(decoder.holdMs()).toBe(40)
    expect(decoder.release().map((stroke) => stroke.kind === 'key' && stroke.name)).toEqual(['escape'])
    expect(decoder.holdMs()).toBe(undefined)
  })

  test('Escape and what was typed right after it are two keys', () => {
    expect(decoded('\x1bj')).toEqual(['escape', 'j'])
    expect(decoded('\x1b\x1b[A')).toEqual(['escape', 'up'])
  })

  test('Backspace is not Delete', () => {
    expect(decoded('\x7f\x1b[3~\b')).toEqual(['backspace', 'delete', 'backspace'])
  })
})

describe('pastes', () => {
  test('come as one text, whatever is in it and however it is split', () => {
    expect(decoded('a\x1b[200~one\rtwo\x1b[A', ' th', 'ree\x1b[20', '1~b')).toEqual([
      'a',
      { paste: 'one\rtwo\x1b[A three' },
      'b',
    ])
  })

  test('without an end are handed on after a while', () => {
    const decoder = keyDecoder()
    decoder.push('\x1b[200~lost')
    expect(decoder.holdMs()).toBe(1000)
    expect(decoder.release()).toEqual([{ kind: 'paste', text: 'lost' }])
    expect(decoder.push('j')).toMatchObject([{ name: 'j' }])
  })
})

test.each([
  ['colour, ended by BEL', '\x1b]11;rgb:ffff/ffff/ffff\x07'],
  ['colour, ended by ST', '\x1b]11;rgb:ffff/ffff/ffff\x1b\\'],
  ['attributes', '\x1b[?62;22c'],
  ["the cursor's place", '\x1b[12;40R'],
  ["the cursor's place in the first row", '\x1b[1;5R'],
  ['mouse', '\x1b[<0;10;20M\x1b[<0;10;20m'],
  ['mouse, the old way', '\x1b[M !!'],
  ['focus', '\x1b[I\x1b[O'],
  ['device control', '\x1bP>|term 1.0\x1b\\'],
])('a report of the terminal is no key: %s', (_what, report) => {
  expect(decoded(`a${report}b`)).toEqual(['a', 'b'])
  expect(decoded('a', ...report, 'b')).toEqual(['a', 'b'])
})

test.each([
  ['\x1b[A', 'up'],
  ['\x1bOB', 'down'],
  ['\x1b[5~', 'pageup'],
  ['\x1b[6~', 'pagedown'],
  ['\x1b[H', 'home'],
  ['\x1b[1~', 'home'],
  ['\x1bOF', 'end'],
  ['\x1b[4~', 'end'],
  ['\r', 'enter'],
  ['\x1b', 'escape'],
  ['\t', 'tab'],
  ['\x1b[Z', 'shift-tab'],
  ['\x03', 'ctrl-c'],
  ['\x1a', 'ctrl-z'],
  ['\x1bOP', 'f1'],
  ['\x1b[11~', 'f1'],
  ['\x1b[[A', 'f1'],
  ['\x1bOR', 'f3'],
  ['\x1b[24~', 'f12'],
  ['\x1b[1;5C', 'ctrl-right'],
  ['\x1b[1;2A', 'shift-up'],
  ['\x1b[3;5~', 'ctrl-delete'],
  ['j', 'j'],
  ['J', 'J'],
  [' ', ' '],
  ['ü', 'ü'],
  ['\x1b[99~', undefined],
  ['\x9b', undefined],
])('%j is %s', (sequence, name) => {
  expect(keyName(sequence)).toBe(name)
})
