/**
 * The characters of strokes. Glass is a light line with round corners, as it is bent; leads are dashed with square
 * corners, the feed heavy, jumpers light; bars are double. In pure ASCII glass is drawn with - | / \ and . ' at
 * corners, the feed is a row of !, a jumper a row of :, a bar a row of %.
 */
import { nowhere } from './map-trace.js'

export type Charset = 'box' | 'ascii'
export type StrokeKind = 'tube' | 'jumper' | 'feed' | 'bar'
export const strokeKinds: readonly StrokeKind[] = ['tube', 'jumper', 'feed', 'bar']

/** Where a tube's path starts (end a) and where it ends (end b): a pair of brackets in path order. */
export const endGlyphs = { a: '[', b: ']' } as const
export const probeGlyph = '@'
export const pairLineGlyph = 'x'

/** Straight strokes — | / \ and the four corners, in the order right-down, left-down, right-up, left-up. */
interface Strokes {
  readonly across: string
  readonly down: string
  readonly rising: string
  readonly falling: string
  readonly corners: string
}

const strokes: Record<Charset, Record<StrokeKind, Strokes>> = {
  box: {
    tube: { across: '─', down: '│', rising: '╱', falling: '╲', corners: '╭╮╰╯' },
    jumper: { across: '╌', down: '╎', rising: '╎', falling: '╎', corners: '┌┐└┘' },
    feed: { across: '╍', down: '╏', rising: '╏', falling: '╏', corners: '┏┓┗┛' },
    bar: { across: '═', down: '║', rising: '║', falling: '║', corners: '╔╗╚╝' },
  },
  ascii: {
    tube: { across: '-', down: '|', rising: '/', falling: '\\', corners: "..''" },
    jumper: { across: ':', down: ':', rising: ':', falling: ':', corners: '::::' },
    feed: { across: '!', down: '!', rising: '!', falling: '!', corners: '!!!!' },
    bar: { across: '%', down: '%', rising: '%', falling: '%', corners: '%%%%' },
  },
}

/** Faint outlines of the face and of sheets: across, down, corner. */
export const outlineGlyphs: Record<Charset, readonly [string, string, string]> = {
  box: ['┈', '┊', '┼'],
  ascii: ['.', '.', '.'],
}

/** The character of a stroke that joins two directions (map-trace.ts) inside a cell. */
export function strokeGlyph(set: Charset, kind: StrokeKind, before: number, behind: number): string {
  const form = strokes[set][kind]
  const one = before === nowhere ? behind : before
  const other = behind === nowhere ? one : behind
  if (one === nowhere) return form.across
  return glyphBetween(form, Math.min(one, other), Math.max(one, other))
}

function glyphBetween(form: Strokes, low: number, high: number): string {
  const turn = high - low
  if (turn === 4 || turn === 0) return straight(form, low)
  // a bend of 45° is drawn by its slant, one of 135° that starts level as a corner towards the slanting side
  const slanted = low % 2 === 1 ? low : high
  const level = low % 2 === 1 ? high : low
  if (low % 2 !== high % 2) {
    const wide = Math.min(turn, 8 - turn) === 3
    return wide && level % 4 === 0 ? corner(form, level, slanted < 4) : straight(form, slanted)
  }
  if (low % 2 === 1) return slantedCorner(low, high)
  // a right angle between level and upright
  return corner(form, low % 4 === 0 ? low : high, low === 2 || high === 2)
}

const straight = (form: Strokes, towards: number): string =>
  [form.across, form.rising, form.down, form.falling][towards % 4]!

/** The corner that opens to one side and up or down. */
const corner = (form: Strokes, side: number, up: boolean): string =>
  form.corners[(up ? 2 : 0) + (side === 0 ? 0 : 1)]!

/** Points of an angle between two slants, by what they open to: right, left, down, up. */
function slantedCorner(low: number, high: number): string {
  if (low === 1 && high === 7) return '<'
  if (low === 3 && high === 5) return '>'
  return low === 5 ? '^' : 'v'
}
