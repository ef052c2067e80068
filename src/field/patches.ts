/**
 * Sheets cut into rectangular patches, the pieces that carry one even charge each. Metres.
 *
 * Each flat part of a sheet is first cut in a grid, finer towards the sheet's own edges where the charge crowds. Then
 * what is coarse for its distance to the nearest conductor, or to the edge of a sheet that faces it, is halved, the
 * worst first, until all are fine enough or there are as many as allowed. Along a conductor or an edge the charge
 * opposite it varies slowly, so patches may be longer there.
 */
import { lineStride } from '../geometry/closest-approach.js'
import type { SheetBody } from '../geometry/conductors.js'
import { pieceToRectangle, rectangleStride } from '../geometry/rectangles.js'
import { lyingHeight } from '../geometry/sheets.js'
import type { Sources } from './patch-sources.js'

export interface Patches {
  readonly count: number
  /** as in geometry/rectangles.ts */
  readonly rectangles: Float64Array
  /** index of the sheet each belongs to */
  readonly sheet: Int32Array
  /** +1 in front of a metal face, −1 behind it (everywhere +1 without one) */
  readonly side: Int8Array
}

export interface PatchRules {
  /** size of a patch over the distance to the nearest conductor */
  readonly size: number
  /** a patch may be so much longer along a conductor, besides once */
  readonly stretch: number
  /** so many may there be after halving */
  readonly most: number
  /** there is metal at z = 0 */
  readonly plane: boolean
}

export const noPatches: Patches = {
  count: 0,
  rectangles: new Float64Array(0),
  sheet: new Int32Array(0),
  side: new Int8Array(0),
}

interface Patch {
  readonly rectangle: Float64Array
  readonly sheet: number
  /** how many times too long it is along u, and along v */
  readonly excess: readonly [number, number]
}

/** How a flat part is cut first, in shares of its shorter side: the strips along an edge, and the others at most. */
interface Grid {
  readonly strips: readonly number[]
  readonly step: number
}
/** fine, and coarser where there are many sheets */
const gridLevels: readonly Grid[] = [
  { strips: [0.04, 0.18], step: 0.5 },
  { strips: [0.15], step: 0.5 },
  { strips: [], step: 0.5 },
  { strips: [], step: 1 },
  { strips: [], step: 2 },
]

/** Cuts of a side of this length, in −half … half; `scale` is the shorter side, edges at start and end may be free. */
function cuts(length: number, scale: number, start: boolean, end: boolean, { strips, step }: Grid): number[] {
  const before: number[] = [0]
  if (start) for (const share of strips) before.push(before.at(-1)! + share * scale)
  const after: number[] = [length]
  if (end) for (const share of strips) after.unshift(after[0]! - share * scale)
  const from = before.at(-1)!
  const to = after[0]!
  const least = strips.length > 0 && (start || end) && length <= 1.5 * scale ? 2 : 1
  const pieces = Math.max(least, Math.ceil((to - from) / (step * scale) - 0.2))
  const between = Array.from({ length: pieces - 1 }, (_, k) => from + ((to - from) * (k + 1)) / pieces)
  return [...before, ...between, ...after].map((s) => s - length / 2)
}

/** Part of a rectangle between cuts along its sides. */
function part(r: Float64Array, u0: number, u1: number, v0: number, v1: number): Float64Array {
  const out = r.slice()
  const s = (u0 + u1) / 2
  const t = (v0 + v1) / 2
  for (let k = 0; k < 3; k++) out[k]! += s * r[3 + k]! + t * r[6 + k]!
  out[9] = (u1 - u0) / 2
  out[10] = (v1 - v0) / 2
  return out
}

/** The flat parts of a sheet: cut where they pass the face, lifted where they lie on it. */
function flatParts(sheet: SheetBody, plane: boolean): { rectangle: Float64Array; edges: Uint8Array }[] {
  const parts: { rectangle: Float64Array; edges: Uint8Array }[] = []
  for (let k = 0; k * rectangleStride < sheet.chords.length; k++) {
    const rectangle = sheet.chords.slice(k * rectangleStride, (k + 1) * rectangleStride)
    const edges = sheet.edges.slice(4 * k, 4 * k + 4)
    const z = rectangle[2]!
    const half = rectangle[10]!
    const upright = rectangle[8] !== 0
    if (plane && upright && Math.abs(z) < half - 1e-9) {
      parts.push({ rectangle: part(rectangle, -rectangle[9]!, rectangle[9]!, -half, -z), edges })
      parts.push({ rectangle: part(rectangle, -rectangle[9]!, rectangle[9]!, -z, half), edges })
      continue
    }
    if (plane && !upright && Math.abs(z) < lyingHeight) rectangle[2] = z < 0 ? -lyingHeight : lyingHeight
    parts.push({ rectangle, edges })
  }
  return parts
}

function gridOf(sheets: readonly SheetBody[], plane: boolean, grid: Grid) {
  const cells: { rectangle: Float64Array; sheet: number }[] = []
  for (const [sheet, body] of sheets.entries()) {
    for (const { rectangle, edges } of flatParts(body, plane)) {
      const width = 2 * rectangle[9]!
      const height = 2 * rectangle[10]!
      // the length of a chord of a wall says nothing about the sheet: its height does
      const scale = rectangle[8] === 0 ? Math.min(width, height) : height
      const us = cuts(width, Math.min(scale, 4 * width), edges[0] === 1, edges[1] === 1, grid)
      const vs = cuts(height, Math.min(scale, height), edges[2] === 1, edges[3] === 1, grid)
      for (let i = 0; i + 1 < us.length; i++)
        for (let j = 0; j + 1 < vs.length; j++)
          cells.push({ rectangle: part(rectangle, us[i]!, us[i + 1]!, vs[j]!, vs[j + 1]!), sheet })
    }
  }
  return cells
}

const foot = new Float64Array(5)

/** How many times too long a patch is along u and v for what runs near it. */
function excessOf(
  rectangle: Float64Array,
  sheet: number,
  { lines, radius, scale, deaf }: Sources,
  { size, stretch, plane }: PatchRules,
): readonly [number, number] {
  const [a, b] = [2 * rectangle[9]!, 2 * rectangle[10]!]
  const reach = Math.hypot(a, b) / 2
  const side = rectangle[2]! < 0 ? -1 : 1
  let across = 0
  let upward = 0
  for (let i = 0; i < radius.length; i++) {
    const p = i * lineStride
    const half = lines[p + 6]! / 2
    const x = lines[p]! + half * lines[p + 3]!
    const y = lines[p + 1]! + half * lines[p + 4]!
    const z = lines[p + 2]! + half * lines[p + 5]!
    if (deaf[i]?.has(sheet) || (plane && radius[i]! > 0 && z * side < 0)) continue
    const share = size * scale[i]!
    const apart = Math.hypot(x - rectangle[0]!, y - rectangle[1]!, z - rectangle[2]!)
    // not even the nearest places could ask for halves
    if (apart - reach - half > Math.max(a, b) / share) continue
    const from = [lines[p]!, lines[p + 1]!, lines[p + 2]!] as const
    const to = [2 * x - from[0], 2 * y - from[1], 2 * z - from[2]] as const
    const distance = pieceToRectangle(rectangle, 0, from, to, 12, foot)
    // the image of a cylinder in a sheet lies nearer than its axis
    const wanted = Math.max(
      share * Math.sqrt(Math.max(0, distance ** 2 - radius[i]! ** 2)),
      0.5 * radius[i]!,
      0.002,
    )
    const alongU =
      lines[p + 3]! * rectangle[3]! + lines[p + 4]! * rectangle[4]! + lines[p + 5]! * rectangle[5]!
    const alongV =
      lines[p + 3]! * rectangle[6]! + lines[p + 4]! * rectangle[7]! + lines[p + 5]! * rectangle[8]!
    across = Math.max(across, a / (wanted * (1 + stretch * alongU ** 2)))
    upward = Math.max(upward, b / (wanted * (1 + stretch * alongV ** 2)))
  }
  return [across, upward]
}

/** Two halves of a patch, across the side that is the most too long. */
function halves({ rectangle, sheet, excess }: Patch, near: Sources, rules: PatchRules): Patch[] {
  const [a, b] = [rectangle[9]!, rectangle[10]!]
  const two =
    excess[0] >= excess[1]
      ? [part(rectangle, -a, 0, -b, b), part(rectangle, 0, a, -b, b)]
      : [part(rectangle, -a, a, -b, 0), part(rectangle, -a, a, 0, b)]
  return two.map((half) => ({ rectangle: half, sheet, excess: excessOf(half, sheet, near, rules) }))
}

const worst = ({ excess }: Patch): number => Math.max(...excess)

/** Halves what is too coarse, the worst first; each part stays in the place of the whole. */
function refined(patches: readonly Patch[], near: Sources, rules: PatchRules): readonly Patch[] {
  let all = patches
  for (;;) {
    const coarse = all.filter((patch) => worst(patch) > 1).sort((p, q) => worst(q) - worst(p))
    const halved = new Set(coarse.slice(0, Math.max(0, rules.most - all.length)))
    if (halved.size === 0) return all
    all = all.flatMap((patch) => (halved.has(patch) ? halves(patch, near, rules) : [patch]))
  }
}

function collected(all: readonly Patch[], plane: boolean): Patches {
  const rectangles = new Float64Array(all.length * rectangleStride)
  all.forEach(({ rectangle }, k) => {
    rectangles.set(rectangle, k * rectangleStride)
  })
  return {
    count: all.length,
    rectangles,
    sheet: Int32Array.from(all, ({ sheet }) => sheet),
    side: Int8Array.from(all, ({ rectangle }) => (plane && rectangle[2]! < 0 ? -1 : 1)),
  }
}

/** The patches of all sheets, sheet after sheet. */
export function patchesOf(sheets: readonly SheetBody[], near: Sources, rules: PatchRules): Patches {
  if (sheets.length === 0) return noPatches
  const grids = gridLevels.map((level) => gridOf(sheets, rules.plane, level))
  const grid = grids.find((cells) => cells.length <= 0.6 * rules.most) ?? grids[grids.length - 1]!
  const coarse = grid.map(({ rectangle, sheet }): Patch => {
    return { rectangle, sheet, excess: excessOf(rectangle, sheet, near, rules) }
  })
  return collected(refined(coarse, near, rules), rules.plane)
}

/** The parts of those patches that are too coarse for what comes near, and which patch each is of. */
export function partsNear(
  { count, rectangles, sheet }: Patches,
  near: Sources,
  rules: PatchRules,
): { readonly parts: Patches; readonly whole: Int32Array } {
  const coarse: Patch[] = []
  // the whole stands in the place of the sheet until the parts are made
  for (let k = 0; k < count; k++) {
    const rectangle = rectangles.slice(k * rectangleStride, (k + 1) * rectangleStride)
    const excess = excessOf(rectangle, k, near, rules)
    if (Math.max(...excess) > 1) coarse.push({ rectangle, sheet: k, excess })
  }
  const { sheet: whole, ...parts } = collected(refined(coarse, near, rules), rules.plane)
  return { parts: { ...parts, sheet: whole.map((k) => sheet[k]!) }, whole }
}

/** The mirror images in z = 0. */
export function mirroredPatches(patches: Patches): Patches {
  const rectangles = patches.rectangles.slice()
  for (let i = 0; i < patches.count; i++)
    for (const k of [2, 5, 8]) rectangles[i * rectangleStride + k]! *= -1
  return { ...patches, rectangles }
}
