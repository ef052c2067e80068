import { expect, test } from 'vitest'
import { chalkLevel, colourLevel } from '../../../src/screen/terminal/colour-level.js'

const terminal = { isTTY: true }
const pipe = { isTTY: false }
const ssh = { TERM: 'xterm-256color' }

test.each([
  ['256 colours over ssh, where COLORTERM does not come along', ssh, terminal, 8],
  ['24 bits where COLORTERM says so', { ...ssh, COLORTERM: 'truecolor' }, terminal, 24],
  ['16 colours on a plain xterm and on the console', { TERM: 'xterm' }, terminal, 4],
  ['none on a dumb terminal, whatever COLORTERM says', { TERM: 'dumb', COLORTERM: 'truecolor' }, terminal, 0],
  ['none on a terminal without a name', {}, terminal, 0],
  ['none in a pipe', ssh, pipe, 0],
  ['none where NO_COLOR is set', { ...ssh, NO_COLOR: '1' }, terminal, 0],
  ['but an empty NO_COLOR says nothing', { ...ssh, NO_COLOR: '' }, terminal, 8],
  ['FORCE_COLOR beats NO_COLOR and the pipe', { ...ssh, NO_COLOR: '1', FORCE_COLOR: '3' }, pipe, 24],
  ['FORCE_COLOR=0 is none', { ...ssh, FORCE_COLOR: '0' }, terminal, 0],
  ['FORCE_COLOR without a number takes what the terminal can', { ...ssh, FORCE_COLOR: '' }, pipe, 8],
] as const)('%s', (_what, env, stream, level) => {
  expect(colourLevel(env, 'auto', stream)).toBe(level)
})

test('the flag beats everything', () => {
  const env = { ...ssh, NO_COLOR: '1', FORCE_COLOR: '3' }
  expect(colourLevel(env, 'never', terminal)).toBe(0)
  expect(colourLevel(env, 'always', pipe)).toBe(8)
  expect(colourLevel({ TERM: 'dumb' }, 'always', pipe)).toBe(4)
  expect((['16', '256', '24bit'] as const).map((flag) => colourLevel(env, flag, pipe))).toEqual([4, 8, 24])
})

test("chalk's count", () => {
  expect(([0, 4, 8, 24] as const).map(chalkLevel)).toEqual([0, 1, 2, 3])
})
