/**
 * Uneven charge of a sheet where a lead comes close. The patches of sheets are cut for what is fixed; leads come and
 * go, and some run right along a coarse patch. So the patches near a lead are cut finer for that lead alone: the parts
 * of a patch may differ by charges that add up to nothing. They are eliminated against the stored factor, after the
 * fixed charges and before the lead's. What they would change between fixed conductors alone is left out.
 */
import { rectangleStride } from '../geometry/rectangles.js'
import { rowGram, rowProducts, solveLowerRows } from '../math/dense.js'
import type { ChargeSystem } from './charge-system.js'
import { definiteFactor } from './definite.js'
import type { FixedField } from './fixed-field.js'
import { followCharges, subtract } from './follow.js'
import { leadDipoleReach } from './harmonics.js'
import type { OpenField } from './lead-field.js'
import { segmentSources } from './patch-sources.js'
import {
  barePatchCross,
  couplePatches,
  type PatchSet,
  patchesBetween,
  patchPotential,
} from './patch-system.js'
import { mirroredPatches, type Patches, partsNear } from './patches.js'
import { solveSkyline } from './skyline.js'

/** most parts for one lead */
const mostParts = 240
/** leads are thin and their segments long: parts may be larger than patches beside glass, and longer along the lead */
const partSize = 1.25
const partStretch = 6

export interface LocalField {
  readonly parts: PatchSet
  /** index of the fixed patch that each part is of; parts of one stand together */
  readonly whole: Int32Array
  /** number of the differences: parts less wholes */
  readonly count: number
  /** Cholesky factor of their coefficients, with the lead's harmonics eliminated */
  readonly factor: Float64Array
  /** their coefficients to the fixed charges, with the fixed factor's L⁻¹: count × f */
  readonly toFixed: Float64Array
  /** L⁻¹ of the coefficients to the lead's charges: l × count, and of Wᵀ P_ff⁻¹ P_fd: nodes × count */
  readonly solved: Float64Array
  readonly toNodes: Float64Array
}

/**
 * From parts to differences, row by row: difference m of a whole is a unit of charge on its part m, taken off all its
 * parts in proportion to their areas.
 */
function differences(rows: Float64Array, { rectangles, count }: Patches, whole: Int32Array): Float64Array {
  const lines = rows.length / count
  const starts = Array.from(whole.keys()).filter((k) => k === 0 || whole[k] !== whole[k - 1])
  const kept = count - starts.length
  const out = new Float64Array(lines * kept)
  const area = (k: number): number =>
    rectangles[rectangleStride * k + 9]! * rectangles[rectangleStride * k + 10]!
  for (let i = 0; i < lines; i++) {
    let next = i * kept
    starts.forEach((from, n) => {
      const to = starts[n + 1] ?? count
      let mean = 0
      let all = 0
      for (let k = from; k < to; k++) {
        mean += area(k) * rows[i * count + k]!
        all += area(k)
      }
      mean /= all
      for (let k = from; k + 1 < to; k++) out[next++] = rows[i * count + k]! - mean
    })
  }
  return out
}

function transposed(a: Float64Array, rows: number): Float64Array {
  const columns = a.length / rows
  const out = new Float64Array(a.length)
  for (let r = 0; r < rows; r++) for (let c = 0; c < columns; c++) out[c * rows + r] = a[r * columns + c]!
  return out
}

/** The uneven charge that this lead wakes; nothing where no sheet is near. */
export function localField(
  fixed: FixedField,
  system: ChargeSystem,
  response: Float64Array,
  solvedLead: Float64Array,
): LocalField | undefined {
  const { options, plane } = fixed
  const { sheets } = fixed.system
  if (sheets.patches.count === 0) return undefined
  const rules = { size: partSize * options.patch, stretch: partStretch, most: mostParts, plane }
  const { parts: patches, whole } = partsNear(sheets.patches, segmentSources(system.segments), rules)
  if (patches.count === 0) return undefined
  const parts: PatchSet = { patches, ...(plane && { images: mirroredPatches(patches) }) }
  const cross = barePatchCross(system.segments, parts)
  const harmonics = new Float64Array(system.hh.count * patches.count)
  couplePatches(system.segments, system.orders, parts, cross, leadDipoleReach, (i, h, j, value) => {
    harmonics[(system.rows[i]! + h) * patches.count + j]! += value
  })
  const toLead = differences(cross.charges, patches, whole)
  const count = toLead.length / system.segments.count
  if (count === 0) return undefined
  const toHarmonics = differences(harmonics, patches, whole)
  followCharges(toLead, toHarmonics, count, response, system.segments.count)
  // both sides of the parts' own coefficients become differences
  const half = differences(patchPotential(parts), patches, whole)
  const own = differences(transposed(half, patches.count), patches, whole)
  const woken = transposed(toHarmonics, system.hh.count)
  for (let k = 0; k < count; k++) solveSkyline(system.hh, 0, system.hh.count, woken, k * system.hh.count)
  subtract(own, rowGram(woken, count, system.hh.count))
  // then what the fixed charges answer
  const f = fixed.system.charges
  const toFixed = differencesToFixed(fixed, parts, whole)
  solveLowerRows(fixed.factor, f, toFixed, count)
  subtract(own, rowGram(toFixed, count, f))
  subtract(toLead, rowProducts(solvedLead, system.segments.count, toFixed, count, f))
  const { factor } = definiteFactor(own, count)
  solveLowerRows(factor, count, toLead, system.segments.count)
  const toNodes = rowProducts(fixed.solvedWeights, fixed.nodes.count, toFixed, count, f)
  solveLowerRows(factor, count, toNodes, fixed.nodes.count)
  return { parts, whole, count, factor, toFixed, solved: toLead, toNodes }
}

/** Coefficients of the differences to the fixed charges, segments and patches: differences × f. */
function differencesToFixed({ system }: FixedField, parts: PatchSet, whole: Int32Array): Float64Array {
  const { segments, sheets, charges } = system
  const toParts = new Float64Array(charges * parts.patches.count)
  toParts.set(barePatchCross(segments, parts).charges)
  toParts.set(patchesBetween(sheets.patches, parts), segments.count * parts.patches.count)
  return transposed(differences(toParts, parts.patches, whole), charges)
}

/** What the uneven charge that `lead` wakes does between it and another lead: charges of lead × charges of other. */
export function localAnswer(lead: OpenField, other: OpenField): Float64Array | undefined {
  const { local } = lead
  if (!local || !near(local.parts.patches, other)) return undefined
  const { charges } = barePatchCross(other.system.segments, local.parts)
  const rows = differences(charges, local.parts.patches, local.whole)
  const n = other.system.segments.count
  const f = local.toFixed.length / local.count
  subtract(rows, rowProducts(other.solved, n, local.toFixed, local.count, f))
  solveLowerRows(local.factor, local.count, rows, n)
  return rowProducts(local.solved, lead.system.segments.count, rows, n, local.count)
}

/** a lead further away than this from all parts does not feel their differences, m */
const felt = 0.1

function near({ count, rectangles }: Patches, { lead }: OpenField): boolean {
  const { points } = lead.line
  return [0, 1, 2].every((c) => {
    let low = Infinity
    let high = -Infinity
    for (let k = c; k < points.length; k += 3) {
      low = Math.min(low, points[k]!)
      high = Math.max(high, points[k]!)
    }
    for (let k = 0; k < count; k++) {
      const place = rectangles[rectangleStride * k + c]!
      if (place > low - felt && place < high + felt) return true
    }
    return false
  })
}
