/**
 * The map of a sign: its conductors as characters in a grid of cells, coloured by instantaneous potential.
 *
 *   const raster = mapRaster(scene, window)                      once per window and wiring
 *   const grid = mapGrid(raster, potentialOf, options)           at every instant, a few hundred µs
 *   const shown = withOverlays(grid, overlays)                   cursor, pair, probe
 */
import { type Charset, endGlyphs, outlineGlyphs, strokeGlyph, strokeKinds } from './map-glyphs.js'
import { type MapRaster, passFlags } from './map-raster.js'
import { aboutZero, type PotentialScale, potentialStep, stepGlyph, unknownGlyph } from './scale.js'
import { type ColourLevel, type Meaning, marks, meaningIndex } from './theme.js'

/** A conductor picked in a cell (row · columns + column), and where along its path, m. */
export interface PickedPlace {
  readonly cell: number
  readonly body: number
  readonly at: number
}

export interface MapOptions {
  readonly scale: PotentialScale
  readonly charset: Charset
  /** what a character of glass says: the direction of the stroke, or the step of potential */
  readonly glyphs: 'stroke' | 'level'
  readonly labels: boolean
  /** the place under the cursor: in that cell its conductor is shown, in others that are shared the one furthest from 0 V */
  readonly picked?: PickedPlace
}

/** A picture ready to be drawn. All arrays hold one entry a cell, row after row. */
export interface MapGrid {
  readonly columns: number
  readonly rows: number
  /** one character each */
  readonly glyphs: readonly string[]
  /** index in theme.ts */
  readonly meanings: Uint8Array
  /** attributes on top of the meaning, bits as in theme.ts; underlined: several conductors share the cell */
  readonly marks: Uint8Array
  /** index of the body shown, -1 for none */
  readonly owner: Int32Array
  /** path length of the place shown, m */
  readonly at: Float32Array
}

/** The potential of a body at a path length and at the instant shown, V; undefined where there is none (unlit). */
export type PotentialOf = (body: number, at: number) => number | undefined

/** Where colours tell steps apart glass keeps its strokes; the few colours of 16 need the character's help. */
export const defaultGlyphs = (level: ColourLevel): MapOptions['glyphs'] => (level >= 8 ? 'stroke' : 'level')

interface Draft {
  readonly glyphs: string[]
  readonly meanings: Uint8Array
  readonly marks: Uint8Array
  readonly owner: Int32Array
  readonly at: Float32Array
}

const blank = meaningIndex('blank')
const unknown = meaningIndex('unknown')
const bar = meaningIndex('bar')
const barKind = strokeKinds.indexOf('bar')

/** Lays potentials over a raster. */
export function mapGrid(raster: MapRaster, potentialOf: PotentialOf, options: MapOptions): MapGrid {
  const { columns, rows } = raster.window
  const cells = columns * rows
  const draft: Draft = {
    glyphs: new Array<string>(cells).fill(' '),
    meanings: new Uint8Array(cells).fill(blank),
    marks: new Uint8Array(cells),
    owner: new Int32Array(cells).fill(-1),
    at: new Float32Array(cells),
  }
  drawOutlines(draft, raster, options.charset)
  drawConductors(draft, raster, potentialOf, options)
  if (options.labels) for (const { cell, text } of raster.labels) write(draft, cell, text, 'label')
  for (const { cell, glyph } of raster.terminals) write(draft, cell, glyph, 'terminal')
  return { columns, rows, ...draft }
}

function drawOutlines(draft: Draft, { outline, window }: MapRaster, charset: Charset): void {
  const face = meaningIndex('face')
  for (let cell = 0; cell < outline.length; cell++) {
    const form = outline[cell]!
    if (form === 0) continue
    // in ASCII every other cell of a level line stays empty, to be as faint as an upright one
    if (charset === 'ascii' && form === 1 && (cell % window.columns) % 2 === 1) continue
    draft.glyphs[cell] = outlineGlyphs[charset][form - 1]!
    draft.meanings[cell] = face
  }
}

function write({ glyphs, meanings }: Draft, cell: number, text: string, meaning: Meaning): void {
  for (let k = 0; k < text.length; k++) {
    glyphs[cell + k] = text[k]!
    meanings[cell + k] = meaningIndex(meaning)
  }
}

function drawConductors(
  draft: Draft,
  raster: MapRaster,
  potentialOf: PotentialOf,
  options: MapOptions,
): void {
  const { first, body, at, kind, flags, sharing } = raster
  const { scale } = options
  for (let cell = 0; cell < sharing.length; cell++) {
    const start = first[cell]!
    const end = first[cell + 1]!
    if (start === end) continue
    const shared = sharing[cell]! > 1
    const picked = options.picked?.cell === cell ? pickedPass(raster, start, end, options.picked) : undefined
    const pass =
      picked ?? (end === start + 1 ? start : furthestPass(raster, start, end, potentialOf, options))
    const v = potentialOf(body[pass]!, at[pass]!)
    const step = v === undefined ? undefined : potentialStep(scale, v)
    const grounded = kind[body[pass]!] === barKind && v === undefined
    draft.meanings[cell] = step ?? (grounded ? bar : unknown)
    draft.glyphs[cell] = passGlyph(raster, pass, step, options)
    draft.owner[cell] = body[pass]!
    draft.at[cell] = at[pass]!
    const bold = flags[pass]! & (passFlags.endA | passFlags.endB) ? marks.bold : 0
    draft.marks[cell] = bold | (shared ? marks.underline : 0)
  }
}

/** The pass of the picked conductor nearest to the picked place; none where it does not pass through the cell. */
function pickedPass(
  { body, at }: MapRaster,
  start: number,
  end: number,
  picked: PickedPlace,
): number | undefined {
  let found: number | undefined
  for (let pass = start; pass < end; pass++) {
    const nearer = found === undefined || Math.abs(at[pass]! - picked.at) < Math.abs(at[found]! - picked.at)
    if (body[pass] === picked.body && nearer) found = pass
  }
  return found
}

/**
 * The pass that is furthest from 0 of those that share a cell. Counted in steps of the scale:
 * between conductors of one step the nearer to the viewer is shown, so that leads behind a letter do not cut it for
 * a difference that no colour shows, and pictures stay still under small changes.
 */
function furthestPass(
  { body, at, flags }: MapRaster,
  start: number,
  end: number,
  potentialOf: PotentialOf,
  { scale }: MapOptions,
): number {
  let found = start
  let most = -Infinity
  for (let pass = start; pass < end; pass++) {
    if (flags[pass]! & passFlags.joined) continue
    const v = potentialOf(body[pass]!, at[pass]!)
    const rank = v === undefined ? -1 : Math.abs(potentialStep(scale, v) - aboutZero)
    // passes come nearest first: a later one of the same rank does not count
    if (rank > most) {
      most = rank
      found = pass
    }
  }
  return found
}

/** The character of a pass: brackets at electrodes, else the step of potential or the stroke. */
function passGlyph(
  { body, kind, joint, flags }: MapRaster,
  pass: number,
  step: number | undefined,
  { charset, glyphs }: MapOptions,
): string {
  if (flags[pass]! & passFlags.endA) return endGlyphs.a
  if (flags[pass]! & passFlags.endB) return endGlyphs.b
  const form = strokeKinds[kind[body[pass]!]!]!
  const tells = form === 'tube' || (flags[pass]! & passFlags.signpost) !== 0
  if (glyphs === 'level' && tells) return step === undefined ? unknownGlyph : stepGlyph(step)
  return strokeGlyph(charset, form, joint[pass]! & 15, joint[pass]! >> 4)
}
