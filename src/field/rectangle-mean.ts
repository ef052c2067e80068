/**
 * Mean inverse distances of evenly charged rectangles: coefficients of potential over K = 1/4πε0, in 1/m. Rectangles
 * as in geometry/rectangles.ts, lines as in geometry/closest-approach.ts. Integrals of 1/R done by hand, in the forms
 * of A. E. Ruehli, P. A. Brennan, "Efficient capacitance calculations for three-dimensional multiconductor systems",
 * 1973 (from memory; checked against quadrature in tests/field/rectangle-mean.test.ts).
 */
import { lineStride } from '../geometry/closest-approach.js'
import { rectangleStride } from '../geometry/rectangles.js'
import { gaussRule } from './gauss.js'

/** y + r without loss where y is negative; `rest` = r² − y² */
const plus = (y: number, r: number, rest: number): number => (y >= 0 ? y + r : rest / (r - y))

/** x ln((y1 + r1)/(y0 + r0)), nothing where the factor is nothing. */
const logTerm = (x: number, y0: number, r0: number, y1: number, r1: number, rest: number): number =>
  x === 0 ? 0 : x * Math.log(plus(y1, r1, rest) / plus(y0, r0, rest))

/** Mean of 1/R over a rectangle with half sides a and b, at (x, y, z) in its own axes. */
export function pointMean(x: number, y: number, z: number, a: number, b: number): number {
  const x0 = -a - x
  const x1 = a - x
  const y0 = -b - y
  const y1 = b - y
  const z2 = z * z
  const left = x0 * x0 + z2
  const right = x1 * x1 + z2
  const low = y0 * y0
  const high = y1 * y1
  const r00 = Math.sqrt(left + low)
  const r01 = Math.sqrt(left + high)
  const r10 = Math.sqrt(right + low)
  const r11 = Math.sqrt(right + high)
  let sum =
    logTerm(x1, y0, r10, y1, r11, right) -
    logTerm(x0, y0, r00, y1, r01, left) +
    logTerm(y1, x0, r01, x1, r11, high + z2) -
    logTerm(y0, x0, r00, x1, r10, low + z2)
  const h = Math.abs(z)
  if (h > 0)
    sum -=
      h *
      (Math.atan((x1 * y1) / (h * r11)) -
        Math.atan((x1 * y0) / (h * r10)) -
        Math.atan((x0 * y1) / (h * r01)) +
        Math.atan((x0 * y0) / (h * r00)))
  return sum / (4 * a * b)
}

/** The function whose fourth derivative ∂⁴/∂x²∂y² is 1/R. */
function fourfold(x: number, y: number, z: number): number {
  const [x2, y2, z2] = [x * x, y * y, z * z]
  const r = Math.sqrt(x2 + y2 + z2)
  let sum = (-(x2 + y2 - 2 * z2) * r) / 6
  if (x !== 0 && y2 !== z2) sum += ((y2 - z2) / 2) * x * Math.log(plus(x, r, y2 + z2))
  if (y !== 0 && x2 !== z2) sum += ((x2 - z2) / 2) * y * Math.log(plus(y, r, x2 + z2))
  if (z !== 0) sum -= x * y * z * Math.atan((x * y) / (z * r))
  return sum
}

const signs = [1, -1, 1, -1] as const

/** Mean of 1/R over two rectangles with the same axes, centres (x, y, z) apart. */
export function parallelMean(
  x: number,
  y: number,
  z: number,
  a1: number,
  b1: number,
  a2: number,
  b2: number,
): number {
  const xs = [x - a1 - a2, x + a1 - a2, x + a1 + a2, x - a1 + a2]
  const ys = [y - b1 - b2, y + b1 - b2, y + b1 + b2, y - b1 + b2]
  // differences smaller than rounding of their terms are nothing: a logarithm of nothing must not meet them
  const tidy = (value: number, size: number): number => (Math.abs(value) < 1e-14 * size ? 0 : value)
  let sum = 0
  for (const [k, s] of signs.entries())
    for (const [m, t] of signs.entries())
      sum += s * t * fourfold(tidy(xs[k]!, a1 + a2), tidy(ys[m]!, b1 + b2), z)
  return sum / (16 * a1 * b1 * a2 * b2)
}

/** Mean inverse distance of a rectangle with itself. */
export const selfRectangle = (a: number, b: number): number => parallelMean(0, 0, 0, a, b, a, b)

/** Mean of 1/R over rectangle k at a point. */
function meanAt(rectangles: Float64Array, k: number, px: number, py: number, pz: number): number {
  const p = k * rectangleStride
  const x = px - rectangles[p]!
  const y = py - rectangles[p + 1]!
  const z = pz - rectangles[p + 2]!
  const ux = rectangles[p + 3]!
  const uy = rectangles[p + 4]!
  const uz = rectangles[p + 5]!
  const vx = rectangles[p + 6]!
  const vy = rectangles[p + 7]!
  const vz = rectangles[p + 8]!
  const alongU = x * ux + y * uy + z * uz
  const alongV = x * vx + y * vy + z * vz
  const across = x * (uy * vz - uz * vy) + y * (uz * vx - ux * vz) + z * (ux * vy - uy * vx)
  return pointMean(alongU, alongV, across, rectangles[p + 9]!, rectangles[p + 10]!)
}

/** Mean over rectangle j, by n × n places, of what rectangle i gives there. */
function sampledMean(a: Float64Array, i: number, b: Float64Array, j: number, n: number): number {
  const { places, weights } = gaussRule(n)
  const q = j * rectangleStride
  const m = b[q + 9]!
  const l = b[q + 10]!
  let sum = 0
  for (let k = 0; k < n; k++)
    for (let h = 0; h < n; h++) {
      const s = m * places[k]!
      const t = l * places[h]!
      const x = b[q]! + s * b[q + 3]! + t * b[q + 6]!
      const y = b[q + 1]! + s * b[q + 4]! + t * b[q + 7]!
      const z = b[q + 2]! + s * b[q + 5]! + t * b[q + 8]!
      sum += weights[k]! * weights[h]! * meanAt(a, i, x, y, z)
    }
  return sum
}

/** Square of a component along a side, over the square of the distance: 3 cos² − 1, times a third of the half side². */
const moment = (along: number, half: number, square: number): number =>
  half * half * ((3 * along * along) / square - 1)

/** Mean of 1/R over rectangle i of `a` and rectangle j of `b`; the same either way round. */
export function rectangleMean(a: Float64Array, i: number, b: Float64Array, j: number): number {
  const p = i * rectangleStride
  const q = j * rectangleStride
  const x = b[q]! - a[p]!
  const y = b[q + 1]! - a[p + 1]!
  const z = b[q + 2]! - a[p + 2]!
  const square = x * x + y * y + z * z
  const a1 = a[p + 9]!
  const b1 = a[p + 10]!
  const a2 = b[q + 9]!
  const b2 = b[q + 10]!
  const on = (of: Float64Array, at: number): number => x * of[at]! + y * of[at + 1]! + z * of[at + 2]!
  const size = 2 * (Math.sqrt(a1 * a1 + b1 * b1) + Math.sqrt(a2 * a2 + b2 * b2))
  if (square > 2.25 * size * size) {
    const moments =
      moment(on(a, p + 3), a1, square) +
      moment(on(a, p + 6), b1, square) +
      moment(on(b, q + 3), a2, square) +
      moment(on(b, q + 6), b2, square)
    return (1 + moments / (6 * square)) / Math.sqrt(square)
  }
  const turn = (s: number, t: number): number => a[s]! * b[t]! + a[s + 1]! * b[t + 1]! + a[s + 2]! * b[t + 2]!
  const same = turn(p + 3, q + 3) ** 2 > 1 - 1e-12 && turn(p + 6, q + 6) ** 2 > 1 - 1e-12
  const crossed = turn(p + 3, q + 6) ** 2 > 1 - 1e-12 && turn(p + 6, q + 3) ** 2 > 1 - 1e-12
  if (same || crossed) {
    const alongU = on(a, p + 3)
    const alongV = on(a, p + 6)
    const across = Math.sqrt(Math.max(0, square - alongU * alongU - alongV * alongV))
    // what is left of rounding is no distance
    const z0 = across < 1e-7 * size ? 0 : across
    return parallelMean(alongU, alongV, z0, a1, b1, same ? a2 : b2, same ? b2 : a2)
  }
  const places = square > 0.5 * size * size ? 2 : square > 0.16 * size * size ? 3 : 5
  return (sampledMean(a, i, b, j, places) + sampledMean(b, j, a, i, places)) / 2
}

/** How a line and a rectangle are averaged: places along the line, or along both sides of the rectangle. */
export interface LineRule {
  readonly along: number
  readonly acrossU: number
  readonly acrossV: number
}

const most = 8
const needed = (length: number, distance: number): number =>
  distance > 0 ? Math.min(most, Math.ceil(1.2 * (length / distance)) + 1) : most

/** The cheaper sound rule for a line of this length at least `distance` from a rectangle. */
export function lineRule(length: number, a: number, b: number, distance: number): LineRule {
  const along = needed(length, distance)
  const acrossU = needed(2 * a, distance)
  const acrossV = needed(2 * b, distance)
  // the potential of a rectangle costs about six times that of a line
  const onLine = acrossU === most || acrossV === most || 6 * along < acrossU * acrossV
  return onLine ? { along, acrossU: 0, acrossV: 0 } : { along: 0, acrossU, acrossV }
}

/** Mean of 1/R over a line at a point. */
function lineAt(lines: Float64Array, i: number, x: number, y: number, z: number): number {
  const p = i * lineStride
  const dx = x - lines[p]!
  const dy = y - lines[p + 1]!
  const dz = z - lines[p + 2]!
  const l = lines[p + 6]!
  const along = dx * lines[p + 3]! + dy * lines[p + 4]! + dz * lines[p + 5]!
  const rest = Math.max(0, dx * dx + dy * dy + dz * dz - along * along)
  const r0 = Math.sqrt(along * along + rest)
  const r1 = Math.sqrt((l - along) * (l - along) + rest)
  return Math.log(plus(l - along, r1, rest) / plus(-along, r0, rest)) / l
}

/** Mean of 1/R over line i and rectangle k by such a rule. */
export function lineRectangleMean(
  lines: Float64Array,
  i: number,
  rectangles: Float64Array,
  k: number,
  { along, acrossU, acrossV }: LineRule,
): number {
  let sum = 0
  if (along > 0) {
    const { places, weights } = gaussRule(along)
    const p = i * lineStride
    const half = lines[p + 6]! / 2
    for (let n = 0; n < along; n++) {
      const s = half * (1 + places[n]!)
      const x = lines[p]! + s * lines[p + 3]!
      const y = lines[p + 1]! + s * lines[p + 4]!
      const z = lines[p + 2]! + s * lines[p + 5]!
      sum += weights[n]! * meanAt(rectangles, k, x, y, z)
    }
    return sum
  }
  const ruleU = gaussRule(acrossU)
  const ruleV = gaussRule(acrossV)
  const q = k * rectangleStride
  for (let n = 0; n < acrossU; n++)
    for (let m = 0; m < acrossV; m++) {
      const s = rectangles[q + 9]! * ruleU.places[n]!
      const t = rectangles[q + 10]! * ruleV.places[m]!
      const x = rectangles[q]! + s * rectangles[q + 3]! + t * rectangles[q + 6]!
      const y = rectangles[q + 1]! + s * rectangles[q + 4]! + t * rectangles[q + 7]!
      const z = rectangles[q + 2]! + s * rectangles[q + 5]! + t * rectangles[q + 8]!
      sum += ruleU.weights[n]! * ruleV.weights[m]! * lineAt(lines, i, x, y, z)
    }
  return sum
}

/** Mean of 1/R over line i and a rectangle several lengths away: point to point, with the second moments of both. */
export function farLineRectangle(
  lines: Float64Array,
  i: number,
  rectangles: Float64Array,
  k: number,
): number {
  const p = i * lineStride
  const q = k * rectangleStride
  const half = lines[p + 6]! / 2
  const x = rectangles[q]! - lines[p]! - half * lines[p + 3]!
  const y = rectangles[q + 1]! - lines[p + 1]! - half * lines[p + 4]!
  const z = rectangles[q + 2]! - lines[p + 2]! - half * lines[p + 5]!
  const square = x * x + y * y + z * z
  const on = (of: Float64Array, at: number): number => x * of[at]! + y * of[at + 1]! + z * of[at + 2]!
  const moments =
    moment(on(lines, p + 3), half, square) +
    moment(on(rectangles, q + 3), rectangles[q + 9]!, square) +
    moment(on(rectangles, q + 6), rectangles[q + 10]!, square)
  return (1 + moments / (6 * square)) / Math.sqrt(square)
}
