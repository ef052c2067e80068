/**
 * The shape of a map: which parts of which conductors lie in each cell of a window. Depends on the window and on the
 * course of the conductors only; potentials are laid over it by map.ts at every instant.
 */
import type { Body } from '../geometry/conductors.js'
import { pointAt } from '../geometry/polyline.js'
import { type StrokeKind, strokeKinds } from './map-glyphs.js'
import { type LabelPlace, labelPlaces } from './map-labels.js'
import type { MapScene } from './map-scene.js'
import { cellChains, direction, drawnChains, nowhere, type Visit } from './map-trace.js'
import { cellAt, inside, type MapWindow } from './map-window.js'

/** What is special about a pass of a conductor through a cell, as bits. */
export const passFlags = {
  /** the electrode at end a, or b, of a tube lies here */
  endA: 1,
  endB: 2,
  /** a lead arriving at an electrode that lies in the same cell: connected, so not two conductors sharing it */
  joined: 4,
  /** a lead that has no character of its own to say sign and size says it in some of its cells */
  signpost: 8,
} as const

/**
 * Passes of conductors through cells, grouped by cell: those of cell c (row · columns + column) are `first[c]` up to
 * `first[c + 1]`, the one nearest the viewer first.
 */
export interface MapRaster {
  readonly window: MapWindow
  readonly first: Int32Array
  /** index of the body */
  readonly body: Int32Array
  /** path length in the middle of the pass, m */
  readonly at: Float32Array
  /** directions to the cells before (low four bits) and behind along the path */
  readonly joint: Uint8Array
  /** index in strokeKinds, of each body */
  readonly kind: Uint8Array
  readonly flags: Uint8Array
  /** number of separate conductors, or strands of one conductor, in each cell */
  readonly sharing: Uint8Array
  /** cells of faint outlines: 0 none, 1 level, 2 upright, 3 corner */
  readonly outline: Uint8Array
  readonly terminals: readonly TerminalCell[]
  readonly labels: readonly LabelPlace[]
}

export interface TerminalCell {
  readonly cell: number
  readonly supply: string
  /** `1` or `2` */
  readonly glyph: string
}

interface Pass {
  readonly cell: number
  readonly body: number
  readonly at: number
  readonly z: number
  readonly joint: number
  readonly flags: number
}

/** every so many cells of a lead one says sign and size */
const signpostSpacing = 4
/** passes of one conductor nearer than this along its path, in heights of a row, are the same strand */
const strandSpacing = 3

/** The raster of a scene. Bodies keep their index; windows may be of any size. */
export function mapRaster(scene: MapScene, window: MapWindow): MapRaster {
  const kind = Uint8Array.from(scene.bodies, (body) => strokeKinds.indexOf(strokeKind(body, scene)))
  const passes: Pass[] = []
  scene.bodies.forEach((body, index) => {
    passes.push(...bodyPasses(body, index, window))
  })
  const merged = withoutRepeats(inViewOrder(passes, window), strandSpacing * window.step * window.aspect)
  const joined = withJoints(merged, scene.bodies)
  const cells = window.columns * window.rows
  const terminals = terminalCells(scene, window)
  const outline = outlineCells(scene, window)
  const first = groupStarts(joined, cells)
  return {
    window,
    first,
    body: Int32Array.from(joined, (pass) => pass.body),
    at: Float32Array.from(joined, (pass) => pass.at),
    joint: Uint8Array.from(joined, (pass) => pass.joint),
    flags: Uint8Array.from(joined, (pass) => pass.flags),
    kind,
    sharing: sharingCounts(joined, cells),
    outline,
    terminals,
    labels: labelPlaces(scene, window, joined, terminals),
  }
}

function strokeKind(body: Body, { terminals }: MapScene): StrokeKind {
  if (body.kind !== 'lead') return body.kind
  return terminals.some(({ end }) => body.between.includes(end)) ? 'feed' : 'jumper'
}

function bodyPasses(body: Body, index: number, window: MapWindow): Pass[] {
  return drawnChains(body, window).flatMap((chain) =>
    chain.flatMap((visit, k) => (inside(window, visit) ? [passOf(body, index, window, chain, k)] : [])),
  )
}

function passOf(body: Body, index: number, { columns }: MapWindow, chain: readonly Visit[], k: number): Pass {
  const visit = chain[k]!
  const before = chain[k - 1]
  const behind = chain[k + 1]
  const at = (visit.from + visit.to) / 2
  return {
    cell: visit.row * columns + visit.column,
    body: index,
    at: visit.from === 0 ? 0 : visit.to === body.line.length ? visit.to : at,
    z: pointAt(body.line, at)[2],
    joint: (before ? direction(visit, before) : nowhere) + 16 * (behind ? direction(visit, behind) : nowhere),
    flags: flagsOf(body, visit, k),
  }
}

function flagsOf(body: Body, visit: Visit, k: number): number {
  const atA = visit.from === 0
  const atB = visit.to === body.line.length
  if (body.kind === 'tube') return (atA ? passFlags.endA : 0) | (atB ? passFlags.endB : 0)
  return body.kind === 'lead' && k % signpostSpacing === signpostSpacing / 2 ? passFlags.signpost : 0
}

/** By cell, and in a cell the conductor nearest the viewer first; from the back that is the lowest. */
function inViewOrder(passes: readonly Pass[], { mirrored }: MapWindow): Pass[] {
  const towards = mirrored ? -1 : 1
  return [...passes].sort(
    (p, q) => p.cell - q.cell || (q.z - p.z) * towards || p.body - q.body || p.at - q.at,
  )
}

/** Passes of the same strand through the same cell made one, its ends kept. */
function withoutRepeats(passes: readonly Pass[], near: number): Pass[] {
  const kept: Pass[] = []
  let start = 0
  for (const pass of passes) {
    if (kept[start]?.cell !== pass.cell) start = kept.length
    let twin = start
    while (twin < kept.length && !sameStrand(kept[twin]!, pass, near)) twin++
    const found = kept[twin]
    if (found === undefined) kept.push(pass)
    else if (pass.flags & isEnd) kept[twin] = { ...pass, flags: pass.flags | found.flags }
  }
  return kept
}

const isEnd = passFlags.endA | passFlags.endB
const sameStrand = (p: Pass, q: Pass, near: number): boolean =>
  p.body === q.body && Math.abs(p.at - q.at) < near

/** Marks leads that arrive at a tube's end in the cell of that end. */
function withJoints(passes: readonly Pass[], bodies: readonly Body[]): Pass[] {
  const endsIn = new Map<number, Set<string>>()
  for (const { cell, body, flags } of passes) {
    const ends = endsIn.get(cell) ?? new Set()
    if (flags & passFlags.endA) ends.add(`${bodies[body]!.name}.a`)
    if (flags & passFlags.endB) ends.add(`${bodies[body]!.name}.b`)
    if (ends.size > 0) endsIn.set(cell, ends)
  }
  return passes.map((pass) => {
    const body = bodies[pass.body]!
    const ends = endsIn.get(pass.cell)
    const arrives = body.kind === 'lead' && ends !== undefined && body.between.some((end) => ends.has(end))
    return arrives ? { ...pass, flags: pass.flags | passFlags.joined } : pass
  })
}

function groupStarts(passes: readonly Pass[], cells: number): Int32Array {
  const first = new Int32Array(cells + 1)
  for (const { cell } of passes) first[cell + 1]! += 1
  for (let c = 0; c < cells; c++) first[c + 1]! += first[c]!
  return first
}

function sharingCounts(passes: readonly Pass[], cells: number): Uint8Array {
  const counts = new Uint8Array(cells)
  for (const { cell, flags } of passes) {
    if (flags & passFlags.joined) continue
    counts[cell] = Math.min(255, counts[cell]! + 1)
  }
  return counts
}

function terminalCells({ terminals }: MapScene, window: MapWindow): TerminalCell[] {
  return terminals.flatMap(({ x, y, supply, glyph }) => {
    const cell = cellAt(window, x, y)
    return inside(window, cell) ? [{ cell: cell.row * window.columns + cell.column, supply, glyph }] : []
  })
}

const level = 1
const upright = 2
const cornered = 3

function outlineCells({ outlines }: MapScene, window: MapWindow): Uint8Array {
  const cells = new Uint8Array(window.columns * window.rows)
  for (const line of outlines)
    for (const chain of cellChains(line, window))
      chain.forEach((visit, k) => {
        if (!inside(window, visit)) return
        const cell = visit.row * window.columns + visit.column
        const form = outlineForm(chain, k)
        cells[cell] = cells[cell] === 0 || cells[cell] === form ? form : cornered
      })
  return cells
}

function outlineForm(chain: readonly Visit[], k: number): number {
  const visit = chain[k]!
  const towards = [chain[k - 1], chain[k + 1]].map((other) => (other ? direction(visit, other) % 4 : nowhere))
  if (!towards.includes(2)) return level
  return towards.includes(0) ? cornered : upright
}
