/** Takes the harmonics out of the coefficients between charges. */
import { rowGram } from '../math/dense.js'
import type { ChargeSystem } from './charge-system.js'
import { denseColumns } from './couplings.js'
import { factorSkyline, type Skyline, solveSkyline } from './skyline.js'

/** the harmonics of one component may take this share off the coefficient of a charge with itself (touching: 0.7) */
const mostTaken = 0.85

/**
 * Factors one component and gives L⁻¹ P_hq of it. Glass drawn through glass can make one indefinite, or nearly so,
 * since pairs are moved apart one by one: its coefficients between different unknowns are then halved until it is sound.
 */
function solvedComponent(
  { hh, couplings, potential, alone }: Reducible,
  from: number,
  to: number,
): { touched: Int32Array; columns: Float64Array } {
  const start = hh.base[from]! + hh.first[from]!
  const kept = hh.values.slice(start, hh.base[to - 1]! + to)
  const size = to - from
  for (;;) {
    const sound = factorSkyline(hh, from, to)
    const { touched, columns } = denseColumns(couplings, from, to)
    if (
      sound &&
      eachSolved(hh, from, to, columns, (k, taken) => taken < mostTaken * own(potential, alone, touched[k]!))
    )
      return { touched, columns }
    for (let r = from; r < to; r++) {
      const row = hh.base[r]! - start
      for (let k = hh.first[r]!; k < r; k++) kept[row + k]! *= 0.5
    }
    for (let k = couplings.starts[from]!; k < couplings.starts[from + size]!; k++) couplings.values[k]! *= 0.5
    hh.values.set(kept, start)
  }
}

type Reducible = Pick<ChargeSystem, 'hh' | 'components' | 'couplings' | 'potential' | 'alone'>

/** What a charge has with itself by now, or a fifth of what it has alone. */
const own = (potential: Float64Array, alone: Float64Array, i: number): number =>
  Math.max(potential[i * (alone.length + 1)]!, 0.2 * alone[i]!)

/** Solves row after row while what it takes off (its square) is accepted. */
function eachSolved(
  hh: Skyline,
  from: number,
  to: number,
  columns: Float64Array,
  accepted: (k: number, taken: number) => boolean,
): boolean {
  const size = to - from
  for (let k = 0; k * size < columns.length; k++) {
    solveSkyline(hh, from, to, columns, k * size)
    let taken = 0
    for (let h = k * size; h < (k + 1) * size; h++) taken += columns[h]! ** 2
    if (!accepted(k, taken)) return false
  }
  return true
}

/** P ← P − P_qh P_hh⁻¹ P_hq, one component after the other. */
export function eliminate(system: Reducible): void {
  const { components, potential } = system
  const count = system.alone.length
  for (let c = 0; c + 1 < components.length; c++) {
    const from = components[c]!
    const to = components[c + 1]!
    if (from === to) continue
    const size = to - from
    const { touched, columns } = solvedComponent(system, from, to)
    if (size <= 4) takeSmall(potential, count, touched, columns, size)
    else takeLarge(potential, count, touched, rowGram(columns, touched.length, size))
  }
  for (let i = 0; i < count; i++)
    for (let j = 0; j < i; j++) potential[j * count + i] = potential[i * count + j]!
}

/** Lower triangle of P −= change at the touched charges (ascending). */
function takeLarge(potential: Float64Array, count: number, touched: Int32Array, change: Float64Array): void {
  for (let p = 0; p < touched.length; p++) {
    const row = touched[p]! * count
    const from = p * touched.length
    for (let q = 0; q <= p; q++) potential[row + touched[q]!]! -= change[from + q]!
  }
}

/** The same from a few columns at once, as a component of one segment has them. */
function takeSmall(
  potential: Float64Array,
  count: number,
  touched: Int32Array,
  columns: Float64Array,
  size: number,
): void {
  for (let h = 0; h < size; h += 2) {
    for (let p = 0; p < touched.length; p++) {
      const row = touched[p]! * count
      const x = columns[p * size + h]!
      const y = columns[p * size + h + 1]!
      for (let q = 0, k = h; q <= p; q++, k += size)
        potential[row + touched[q]!]! -= x * columns[k]! + y * columns[k + 1]!
    }
  }
}
