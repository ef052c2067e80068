import { expect, test } from 'vitest'
import { backgroundOf, groundOfColour } from '../../../src/screen/terminal/background.js'
import { fakeInput, fakeOutput } from './fake-streams.js'

const attributes = '\x1b[?62;22c'

/** What comes of these reads, and what is put back for the next reader. */
async function asked(reads: readonly (string | Uint8Array)[], env = {}) {
  const input = fakeInput()
  const output = fakeOutput()
  const answer = backgroundOf(input.stream, output.stream, env, 30)
  for (const read of reads) input.type(read)
  return { ground: await answer, question: output.written, putBack: input.putBack }
}

test('the colour is asked for, with a question that every terminal answers behind it', async () => {
  const { ground, question, putBack } = await asked([`\x1b]11;rgb:1e1e/1e1e/1e1e\x1b\\${attributes}`])
  expect(question).toEqual(['\x1b]11;?\x07\x1b[c'])
  expect(ground).toBe('dark')
  expect(putBack).toEqual([])
})

test('keys typed meanwhile are put back, around and between the answers', async () => {
  const e = Buffer.from('é')
  const reads = ['j', e.subarray(0, 1), e.subarray(1), '\x1b]11;rgb:ff/ff/ff\x07k', `${attributes}\x1b[A`]
  expect(await asked(reads)).toMatchObject({ ground: 'light', putBack: ['jék\x1b[A'] })
})

test('a terminal that knows no colours or answers nothing leaves it to COLORFGBG', async () => {
  expect((await asked([attributes])).ground).toBe(undefined)
  expect((await asked(['q'])).putBack).toEqual(['q'])
  expect((await asked([], { COLORFGBG: '0;15' })).ground).toBe('light')
  expect((await asked([attributes], { COLORFGBG: '15;default;0' })).ground).toBe('dark')
  expect((await asked([attributes], { COLORFGBG: '15;default' })).ground).toBe(undefined)
})

// WCAG 2.2 relative luminance: white 1, black 0; the grey with equal contrast to both has L = 0.179
test.each([
  ['ffff/ffff/ffff', 'light'],
  ['0000/0000/0000', 'dark'],
  ['00/2b/36', 'dark'],
  ['fdf6/e3e3/fdf6', 'light'],
  ['#1e1e2e', 'dark'],
  ['7777/7777/7777', 'light'],
  ['7474/7474/7474', 'dark'],
  ['nonsense', undefined],
] as const)('%s is %s', (colour, ground) => {
  expect(groundOfColour(colour)).toBe(ground)
})
