import { expect, test } from 'vitest'
import { type ColourLevel, type Ground, marks, meanings, sgr, stepMeaning } from '../../src/view/theme.js'

type Rgb = readonly [number, number, number]

/** default palette of xterm, as in its XTerm-col.ad (from memory) */
const xterm16 = (
  '000000 cd0000 00cd00 cdcd00 0000ee cd00cd 00cdcd e5e5e5 ' +
  '7f7f7f ff0000 00ff00 ffff00 5c5cff ff00ff 00ffff ffffff'
)
  .split(' ')
  .map(hex)

function hex(text: string): Rgb {
  const at = (k: number) => Number.parseInt(text.slice(k, k + 2), 16)
  return [at(0), at(2), at(4)]
}

/** The 256-colour cube and grey ramp: levels 0, 95, 135 … 255; greys 8, 18 … 238 (xterm's 256colres). */
function xterm256(n: number): Rgb {
  if (n >= 232) return [8 + 10 * (n - 232), 8 + 10 * (n - 232), 8 + 10 * (n - 232)]
  const level = (k: number) => (k === 0 ? 0 : 55 + 40 * k)
  return [level(Math.floor((n - 16) / 36)), level(Math.floor((n - 16) / 6) % 6), level((n - 16) % 6)]
}

/** The foreground that SGR parameters set; undefined for the terminal's own. */
function colourOf(codes: string): Rgb | undefined {
  const numbers = codes.split(';').map(Number)
  const extended = numbers.indexOf(38)
  if (extended >= 0) {
    const [kind, a = 0, b = 0, c = 0] = numbers.slice(extended + 1)
    return kind === 5 ? xterm256(a) : [a, b, c]
  }
  const code = numbers.find((n) => (n >= 30 && n < 38) || (n >= 90 && n < 98))
  return code === undefined ? undefined : xterm16[code >= 90 ? code - 82 : code - 30]
}

const linear = (c: number) => (c / 255 <= 0.04045 ? c / 255 / 12.92 : ((c / 255 + 0.055) / 1.055) ** 2.4)

/** Relative luminance and contrast ratio of WCAG 2.2. */
const luminance = ([r, g, b]: Rgb) => 0.2126 * linear(r) + 0.7152 * linear(g) + 0.0722 * linear(b)
function contrast(a: Rgb, b: Rgb): number {
  const [low, high] = [luminance(a), luminance(b)].sort((p, q) => p - q)
  return (high! + 0.05) / (low! + 0.05)
}

const grounds: Record<Ground, Rgb> = { dark: [0, 0, 0], light: [255, 255, 255] }
const levels: readonly ColourLevel[] = [4, 8, 24]
const themes = (['dark', 'light'] as const).flatMap((ground) => levels.map((level) => ({ ground, level })))

test.each(themes)('every meaning shows on its ground with contrast of at least 3: %o', (theme) => {
  for (const meaning of meanings) {
    const colour = colourOf(sgr(theme, meaning))
    if (colour) expect([meaning, contrast(colour, grounds[theme.ground]) >= 3]).toEqual([meaning, true])
  }
})

test.each(themes)('the seven steps of potential look different: %o', (theme) => {
  expect(new Set(meanings.slice(0, 7).map((meaning) => sgr(theme, meaning))).size).toBe(7)
})

/** Machado, Oliveira, Fernandes 2009, table 1, severity 1.0, on linear RGB (from memory). */
const blindness = {
  protan: [0.152286, 1.052583, -0.204868, 0.114503, 0.786281, 0.099216, -0.003882, -0.048116, 1.051998],
  deutan: [0.367322, 0.860646, -0.227968, 0.280085, 0.672501, 0.047413, -0.01182, 0.04294, 0.968881],
  tritan: [1.255528, -0.076749, -0.178779, -0.078411, 0.930809, 0.147602, 0.004733, 0.691367, 0.3039],
}

/** OKLab (Ottosson 2020) of a colour as seen with a deficiency. */
function seen(colour: Rgb, m: readonly number[]): Rgb {
  const l = colour.map(linear)
  const [r, g, b] = [0, 3, 6].map((k) => Math.max(0, m[k]! * l[0]! + m[k + 1]! * l[1]! + m[k + 2]! * l[2]!))
  const long = Math.cbrt(0.4122214708 * r! + 0.5363325363 * g! + 0.0514459929 * b!)
  const middle = Math.cbrt(0.2119034982 * r! + 0.6806995451 * g! + 0.1073969566 * b!)
  const short = Math.cbrt(0.0883024619 * r! + 0.2817188376 * g! + 0.6299787005 * b!)
  return [
    0.2104542553 * long + 0.793617785 * middle - 0.0040720468 * short,
    1.9779984951 * long - 2.428592205 * middle + 0.4505937099 * short,
    0.0259040371 * long + 0.7827717662 * middle - 0.808675766 * short,
  ]
}

test.each(themes.filter(({ level }) => level >= 8))(
  'no two steps of potential look alike to a colour-blind eye: %o',
  (theme) => {
    for (const matrix of Object.values(blindness)) {
      const colours = meanings.slice(0, 7).map((meaning) => seen(colourOf(sgr(theme, meaning))!, matrix))
      // a just noticeable difference is about 0.02 in OKLab: three of them between any two steps
      for (const [i, a] of colours.entries())
        for (const b of colours.slice(i + 1))
          expect(Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2])).toBeGreaterThan(0.06)
    }
  },
)

test('without colours only attributes are left', () => {
  const codes = meanings.flatMap((meaning) => sgr({ level: 0, ground: 'dark' }, meaning).split(';'))
  expect([...new Set(codes)].sort()).toEqual(['', '1', '7'])
})

test('marks come on top of a meaning', () => {
  const theme = { level: 8, ground: 'dark' } as const
  expect(sgr(theme, 'plus-3')).toBe('38;5;166')
  expect(sgr(theme, 'plus-3', marks.underline | marks.bold)).toBe('1;4;38;5;166')
  expect(sgr({ level: 24, ground: 'dark' }, 'minus-3')).toBe('38;2;18;137;231')
  expect(sgr({ level: 0, ground: 'light' }, 'minus-3', marks.underline)).toBe('4')
  expect(sgr(theme, 'banner-danger', marks.bold)).toBe('1;7;38;5;203')
})

test('plain text gets no codes', () => {
  const theme = { level: 8, ground: 'light' } as const
  expect(sgr(theme, 'text')).toBe('')
  expect(sgr(theme, 'face')).toBe('38;5;244')
})

test('a step of potential has the meaning of its index, no potential is unknown', () => {
  expect([0, 1, 2, 3, 4, 5, 6, undefined].map(stepMeaning)).toEqual(meanings.slice(0, 8))
})
