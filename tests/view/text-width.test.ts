import { expect, test } from 'vitest'
import { cut, padEnd, textWidth } from '../../src/view/text-width.js'

test('width counts cells, not characters', () => {
  expect(['abc', '界', 'e\u0301', '─│', ''].map(textWidth)).toEqual([3, 2, 1, 2, 0])
})

test('text that fits is left alone, other text ends in the mark', () => {
  expect(cut('harbour', 7)).toBe('harbour')
  expect(cut('harbour', 5)).toBe('harb…')
  expect(cut('harbour', 5, '..')).toBe('har..')
  expect(cut('harbour', 1, '..')).toBe('')
})

test('a wide character is not cut in two', () => {
  expect(cut('世界世界', 5)).toBe('世界…')
  expect(cut('世界世界', 4)).toBe('世…')
})

test('padding gives exactly the cells asked for', () => {
  expect(padEnd('界', 4)).toBe('界  ')
  expect(padEnd('long', 2)).toBe('long')
})
