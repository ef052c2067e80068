/**
 * What colours mean. The view speaks of meanings only; here each becomes the parameters of an SGR escape
 * (`38;5;75`), for the colours a terminal has and the ground it has. Without colour only attributes remain
 * (bold, underline, inverse), and every pane must still say the same by its characters.
 */
import { aboutZero, stepCount } from './scale.js'

/** The closed list. The first seven are the steps of potential in scale.ts, by the same index. */
export const meanings = [
  'minus-3',
  'minus-2',
  'minus-1',
  'about-0',
  'plus-1',
  'plus-2',
  'plus-3',
  'unknown',
  'blank',
  'text',
  'title',
  'dim',
  'key',
  'tube',
  'feed',
  'jumper',
  'bar',
  'face',
  'end',
  'terminal',
  'label',
  'cursor',
  'pair',
  'probe',
  'fix',
  'watch',
  'within',
  'banner-danger',
  'banner-fix',
  'banner-watch',
  'banner-note',
] as const
export type Meaning = (typeof meanings)[number]
type Step = 'minus-3' | 'minus-2' | 'minus-1' | 'about-0' | 'plus-1' | 'plus-2' | 'plus-3'

const meaningIndices = new Map<Meaning, number>(meanings.map((meaning, index) => [meaning, index]))
/** Index of a meaning, for the typed arrays of a map. */
export const meaningIndex = (meaning: Meaning): number => meaningIndices.get(meaning) ?? 0

/** Attributes on top of a meaning, as bits; they survive without colour. */
export const marks = { bold: 1, underline: 2, inverse: 4 } as const

/** Colours: none, the 16 of the terminal's own palette, 256, 24-bit. */
export type ColourLevel = 0 | 4 | 8 | 24
export type Ground = 'dark' | 'light'

export interface Theme {
  readonly level: ColourLevel
  readonly ground: Ground
}

interface Ink {
  /** number of the 256-colour cube, or #rrggbb where 24 bits look better */
  readonly c256: number
  readonly c24?: string
  /** foreground code of the 16 colours */
  readonly c16: number
}
const ink = (c256: number, c16: number, c24?: string): Ink =>
  c24 === undefined ? { c256, c16 } : { c256, c16, c24 }

/**
 * Seven steps, blue – neutral – orange or red, strongest outside. On a dark ground the outer steps are the most
 * saturated, on a light ground the darkest. Told apart under simulated colour blindness (Machado 2009).
 */
const potentials: Record<Ground, readonly Ink[]> = {
  dark: [
    ink(32, 94, '#1289e7'),
    ink(75, 36, '#6cabea'),
    ink(153, 96, '#aacaec'),
    ink(254, 37, '#e8e8e8'),
    ink(216, 93, '#ebc0a7'),
    ink(209, 33, '#e79969'),
    ink(166, 91, '#e06d00'),
  ],
  // the 16 colours hold only two blues and two reds that show on white: bold makes the third
  light: [
    ink(19, 34, '#00289a'),
    ink(26, 34, '#2067c8'),
    ink(67, 94, '#6690bb'),
    ink(242, 90, '#626262'),
    ink(137, 91, '#b0865a'),
    ink(130, 31, '#b85a00'),
    ink(88, 31, '#801400'),
  ],
}

/** the inks beside the scale: hues that it does not use, so that nothing here is taken for a potential */
const inks: Record<Ground, Record<'grey' | 'faint' | 'pink' | 'green' | 'red' | 'yellow' | 'cyan', Ink>> = {
  dark: {
    grey: ink(246, 37),
    faint: ink(243, 90),
    pink: ink(213, 95),
    green: ink(114, 92),
    red: ink(203, 91),
    yellow: ink(221, 93),
    cyan: ink(80, 96),
  },
  light: {
    grey: ink(241, 90),
    faint: ink(244, 90),
    pink: ink(127, 35),
    // green, yellow and cyan of the 16 do not show on white
    green: ink(28, 90),
    red: ink(160, 31),
    yellow: ink(94, 35),
    cyan: ink(30, 34),
  },
}

interface Look {
  readonly ink?: keyof (typeof inks)['dark']
  readonly marks?: number
}

const { bold, inverse } = marks

/** How everything that is not a step of potential looks. Without an ink: the terminal's own foreground. */
const looks: Record<Exclude<Meaning, Step>, Look> = {
  unknown: { ink: 'grey' },
  blank: {},
  text: {},
  title: { marks: bold },
  dim: { ink: 'grey' },
  key: { ink: 'cyan', marks: bold },
  tube: {},
  feed: { ink: 'cyan' },
  jumper: { ink: 'grey' },
  bar: { ink: 'grey' },
  face: { ink: 'faint' },
  end: { marks: bold },
  terminal: { marks: bold },
  label: { marks: bold },
  cursor: { marks: inverse },
  pair: { ink: 'pink', marks: bold },
  probe: { ink: 'green', marks: bold },
  fix: { ink: 'red', marks: bold },
  watch: { ink: 'yellow' },
  within: { ink: 'green' },
  'banner-danger': { ink: 'red', marks: bold | inverse },
  'banner-fix': { ink: 'red', marks: bold },
  'banner-watch': { ink: 'yellow', marks: bold },
  'banner-note': { ink: 'grey' },
}

const isStep = (meaning: Meaning): meaning is Step => meaningIndex(meaning) < stepCount

function inkOf(meaning: Meaning, ground: Ground): Ink | undefined {
  if (isStep(meaning)) return potentials[ground][meaningIndex(meaning)]
  const name = looks[meaning].ink
  return name === undefined ? undefined : inks[ground][name]
}

/** Attributes that a meaning brings along. */
function ownMarks(meaning: Meaning, { level, ground }: Theme): number {
  if (!isStep(meaning)) return looks[meaning].marks ?? 0
  // on a light ground two neighbouring steps share each outer colour of the 16
  const outer = meaning === 'minus-3' || meaning === 'plus-3'
  return outer && level === 4 && ground === 'light' ? bold : 0
}

/**
 * SGR parameters of a meaning with extra marks, without `ESC [` and `m`; '' for the terminal's own look. Always meant
 * to follow a reset: `ESC [0;…m`.
 */
export function sgr(theme: Theme, meaning: Meaning, extra = 0): string {
  const all = ownMarks(meaning, theme) | extra
  const ink = inkOf(meaning, theme.ground)
  const codes: string[] = []
  if (all & marks.bold) codes.push('1')
  if (all & marks.underline) codes.push('4')
  if (all & marks.inverse) codes.push('7')
  if (ink !== undefined && theme.level !== 0) codes.push(colourCode(ink, theme.level))
  return codes.join(';')
}

function colourCode({ c256, c24, c16 }: Ink, level: ColourLevel): string {
  if (level === 4) return String(c16)
  if (level === 8 || c24 === undefined) return `38;5;${c256}`
  const [red, green, blue] = [1, 3, 5].map((at) => Number.parseInt(c24.slice(at, at + 2), 16))
  return `38;2;${red};${green};${blue}`
}

/** The meaning of a step of potential; of no step: unknown. */
export const stepMeaning = (step: number | undefined): Meaning =>
  step === undefined ? 'unknown' : (meanings[step] ?? meanings[aboutZero])
