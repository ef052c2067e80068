/**
 * Uneven charge around a cylinder, where another conductor is near.
 *
 * Besides its total charge q a segment can carry harmonics c_m, s_m: the charge per angle on its equivalent cylinder is
 * (q + 2 Σ c_m cos mθ + 2 Σ s_m sin mθ)/2π. All potentials are tested with the same shapes (Galerkin), so every block
 * is symmetric by construction. Order of the unknowns of one segment: q, c_1, s_1, c_2, s_2, …
 *
 * In two dimensions harmonic m has the potential 2 c_m/(m l) (a/R)^m cos mθ (over K = 1/4πε0), hence the self term
 * 2/(m l); harmonics of pieces that continue each other are taken as independent, since their field dies out within a
 * radius or two. Two such cylinders at axis distance D need orders up to where t^(2M+2) is negligible, t the ratio of
 * the image construction (W. R. Smythe, "Static and Dynamic Electricity", cylinders as bipolar circles, from memory).
 */
import { lineStride } from '../geometry/closest-approach.js'
import type { Segments } from '../geometry/segments.js'
import { lineMean } from './line-mean.js'

/** What the ring construction needs: lines, their cross frames and radii. */
export type RingSource = Pick<Segments, 'lines' | 'frames' | 'radius'>

/** Self term of harmonic m of a segment of length l, 1/m. */
export const harmonicSelf = (m: number, l: number): number => 2 / (m * l)

/** Highest order that cylinder a1 needs beside cylinder a2 at axis distance D, at most `most`; 0 when it needs none. */
export function neededOrder(a1: number, a2: number, axes: number, most: number): number {
  const h = (axes * axes + a1 * a1 - a2 * a2) / (2 * axes)
  if (h <= a1) return most
  const t = (h - Math.sqrt(h * h - a1 * a1)) / a1
  let order = 0
  for (let left = t * t; left > 0.003 && order < most; left *= t * t) order++
  return order
}

/** Distances, in radii, below which each order of a cylinder is felt: index m − 1. */
const reaches = Float64Array.from({ length: 16 }, (_, k) => ((k + 1) ** 1.5 / 0.07) ** (1 / (k + 1)))
/** Beyond this many radii only the first harmonic is felt, and that as a line of dipoles. */
export const harmonicReach = reaches[1]!
/** Up to here a thin lead's dipoles are worth while: they are small, and little is shielded by them. */
export const leadDipoleReach = reaches[0]!
/**
 * Dipoles are felt up to this many radii. Where other glass shields two conductors from each other almost
 * completely, what is left between them would get the wrong sign without the dipoles of the glass between.
 */
export const dipoleReach = 60

/** Highest order of a cylinder of radius a that something at axis distance D feels, at most `most`. */
export function feltOrder(a: number, axes: number, most: number): number {
  let order = 0
  while (order < most && axes < reaches[order]! * a) order++
  return order
}

/** Harmonics of two cylinders act on each other, not only on charges, up to this distance over √(a1 a2). */
export const mutualReach = 5

/** the rings lie this deep inside the cylinders, so that the harmonics a ring cannot tell apart stay small */
const depth = 0.3

/** Weights that make order m's unknowns from the lines of a ring: (2m + 1) × lines, row-major. */
interface Ring {
  readonly lines: number
  readonly cos: Float64Array
  readonly sin: Float64Array
  readonly weights: Float64Array
}

function makeRing(order: number): Ring {
  const lines = order === 0 ? 1 : 2 * order + 2
  const angle = (k: number): number => (2 * Math.PI * k) / lines
  const weights = new Float64Array((2 * order + 1) * lines)
  for (let k = 0; k < lines; k++) {
    weights[k] = 1 / lines
    for (let m = 1; m <= order; m++) {
      const weight = 2 / (lines * depth ** m)
      weights[(2 * m - 1) * lines + k] = weight * Math.cos(m * angle(k))
      weights[2 * m * lines + k] = weight * Math.sin(m * angle(k))
    }
  }
  const cos = Float64Array.from({ length: lines }, (_, k) => (order === 0 ? 0 : depth * Math.cos(angle(k))))
  const sin = Float64Array.from({ length: lines }, (_, k) => (order === 0 ? 0 : depth * Math.sin(angle(k))))
  return { lines, cos, sin, weights }
}

const rings: Ring[] = []
function ringOf(order: number): Ring {
  while (rings.length <= order) rings.push(makeRing(rings.length))
  return rings[order]!
}

const most = 40
const linesA = new Float64Array(most * lineStride)
const linesB = new Float64Array(most * lineStride)
const means = new Float64Array(most * most)
const half = new Float64Array(most * most)

/** The lines of a ring around segment i, moved by `shift`. */
function layRing(
  source: RingSource,
  i: number,
  ring: Ring,
  shift: Float64Array | undefined,
  out: Float64Array,
): void {
  const p = i * lineStride
  const a = source.radius[i]!
  for (let k = 0; k < ring.lines; k++) {
    const x = a * ring.cos[k]!
    const y = a * ring.sin[k]!
    for (let d = 0; d < 3; d++) {
      const across = x * source.frames[6 * i + d]! + y * source.frames[6 * i + 3 + d]!
      out[k * lineStride + d] = source.lines[p + d]! + across + (shift ? shift[d]! : 0)
      out[k * lineStride + 3 + d] = source.lines[p + 3 + d]!
    }
    out[k * lineStride + 6] = source.lines[p + 6]!
  }
}

/**
 * Coefficients between the unknowns of segment i (orders up to mi) and of segment j (up to mj), the latter moved by
 * `shift`: (2 mi + 1) × (2 mj + 1), row-major, into `out`; 1/m.
 */
export function ringBlock(
  a: RingSource,
  i: number,
  mi: number,
  b: RingSource,
  j: number,
  mj: number,
  shift: Float64Array | undefined,
  out: Float64Array,
): void {
  const ringA = ringOf(mi)
  const ringB = ringOf(mj)
  layRing(a, i, ringA, undefined, linesA)
  layRing(b, j, ringB, shift, linesB)
  const na = ringA.lines
  const nb = ringB.lines
  for (let p = 0; p < na; p++)
    for (let q = 0; q < nb; q++) means[p * nb + q] = lineMean(linesA, p, linesB, q, 0)
  // Fourier transform along the second ring, then along the first
  const wide = 2 * mj + 1
  for (let p = 0; p < na; p++)
    for (let v = 0; v < wide; v++) {
      let sum = 0
      for (let q = 0; q < nb; q++) sum += means[p * nb + q]! * ringB.weights[v * nb + q]!
      half[p * wide + v] = sum
    }
  for (let u = 0; u < 2 * mi + 1; u++)
    for (let v = 0; v < wide; v++) {
      let sum = 0
      for (let p = 0; p < na; p++) sum += ringA.weights[u * na + p]! * half[p * wide + v]!
      out[u * wide + v] = sum
    }
}

/**
 * Coefficients between the unknowns of segment i (orders up to m, the segment moved by `shift`) and something else's
 * total charge, of which `mean` gives the coefficient with one line: 2 m + 1 values into `out`; 1/m.
 */
export function ringMeans(
  source: RingSource,
  i: number,
  m: number,
  shift: Float64Array | undefined,
  mean: (lines: Float64Array, k: number) => number,
  out: Float64Array,
): void {
  const ring = ringOf(m)
  layRing(source, i, ring, shift, linesA)
  out.fill(0, 0, 2 * m + 1)
  for (let k = 0; k < ring.lines; k++) {
    const value = mean(linesA, k)
    for (let u = 0; u <= 2 * m; u++) out[u]! += ring.weights[u * ring.lines + k]! * value
  }
}

/** places along a segment, in half lengths, that stand for all of it (Gauss) */
const twoPoints = [-Math.sqrt(1 / 3), Math.sqrt(1 / 3)]
const onePoint = [0]

/**
 * Coefficients between the first harmonic of segment i (cosine and sine: dipoles a·e along it) and the charge of a
 * segment j further away, 1/m, added to out[0] and out[1] with this sign. Exact along i, by one or two points along j.
 */
export function dipoleMeans(
  a: RingSource,
  i: number,
  b: RingSource,
  j: number,
  sign: number,
  out: Float64Array,
): void {
  const p = i * lineStride
  const q = j * lineStride
  const l = a.lines[p + 6]! / 2
  const m = b.lines[q + 6]! / 2
  const { lines, frames } = a
  const e = 6 * i
  // from the middle of i to the middle of j
  const x = b.lines[q]! + m * b.lines[q + 3]! - lines[p]! - l * lines[p + 3]!
  const y = b.lines[q + 1]! + m * b.lines[q + 4]! - lines[p + 1]! - l * lines[p + 4]!
  const z = b.lines[q + 2]! + m * b.lines[q + 5]! - lines[p + 2]! - l * lines[p + 5]!
  const places = x * x + y * y + z * z > 16 * m * m ? onePoint : twoPoints
  const scale = (sign * a.radius[i]!) / places.length
  for (const place of places) {
    const dx = x + place * m * b.lines[q + 3]!
    const dy = y + place * m * b.lines[q + 4]!
    const dz = z + place * m * b.lines[q + 5]!
    const along = dx * lines[p + 3]! + dy * lines[p + 4]! + dz * lines[p + 5]!
    const square = dx * dx + dy * dy + dz * dz
    const across = square - along * along
    // mean of 1/R³ along i, seen from there
    const near = along - l
    const far = along + l
    const mean =
      across > 1e-4 * square
        ? (far / Math.sqrt(across + far * far) - near / Math.sqrt(across + near * near)) / (2 * l * across)
        : 1 / (square * Math.sqrt(square))
    out[0]! += scale * mean * (dx * frames[e]! + dy * frames[e + 1]! + dz * frames[e + 2]!)
    out[1]! += scale * mean * (dx * frames[e + 3]! + dy * frames[e + 4]! + dz * frames[e + 5]!)
  }
}
