/**
 * Mean inverse distances between straight line charges: coefficients of potential over K = 1/4πε0, in 1/m.
 * Lines are kept as in geometry/closest-approach.ts. Closed forms after Campbell 1915 / Grover, "Inductance
 * Calculations", 1946 (from memory; checked against quadrature in tests/field/line-mean.test.ts).
 */
import { lineStride } from '../geometry/closest-approach.js'

/** sine² of the angle under which the parallel form is used: the skew form loses its digits there */
const nearParallel = 1e-8

/** Mean inverse distance between the axis of a cylinder and its own surface, length l, radius a. */
export const selfMean = (l: number, a: number): number =>
  (2 / l) * (Math.asinh(l / a) - Math.sqrt(1 + (a / l) ** 2) + a / l)

/**
 * Mean of 1/R over segment i of `a` and segment j of `b`, with `extra` (m²) added to the square of every distance:
 * the continuity rule for segments of one conductor. Errs under 0.05 % where the far rule is used.
 */
export function lineMean(a: Float64Array, i: number, b: Float64Array, j: number, extra: number): number {
  const p = i * lineStride
  const q = j * lineStride
  const l = a[p + 6]!
  const m = b[q + 6]!
  // vector from middle to middle
  const rx = a[p]! + 0.5 * l * a[p + 3]! - b[q]! - 0.5 * m * b[q + 3]!
  const ry = a[p + 1]! + 0.5 * l * a[p + 4]! - b[q + 1]! - 0.5 * m * b[q + 4]!
  const rz = a[p + 2]! + 0.5 * l * a[p + 5]! - b[q + 2]! - 0.5 * m * b[q + 5]!
  const square = rx * rx + ry * ry + rz * rz + extra
  if (square > 2.25 * (l + m) * (l + m)) {
    // far: point to point, with the second moments of both lines
    const ru = rx * a[p + 3]! + ry * a[p + 4]! + rz * a[p + 5]!
    const rv = rx * b[q + 3]! + ry * b[q + 4]! + rz * b[q + 5]!
    const inverse = 1 / square
    const moments = l * l * (3 * ru * ru * inverse - 1) + m * m * (3 * rv * rv * inverse - 1)
    return Math.sqrt(inverse) * (1 + (moments * inverse) / 24)
  }
  const c = a[p + 3]! * b[q + 3]! + a[p + 4]! * b[q + 4]! + a[p + 5]! * b[q + 5]!
  return 1 - c * c < nearParallel
    ? parallelMean(a, p, b, q, rx, ry, rz, extra)
    : skewMean(a, p, b, q, c, extra)
}

function parallelMean(
  a: Float64Array,
  p: number,
  b: Float64Array,
  q: number,
  rx: number,
  ry: number,
  rz: number,
  extra: number,
): number {
  const l = a[p + 6]!
  const m = b[q + 6]!
  const ux = a[p + 3]!
  const uy = a[p + 4]!
  const uz = a[p + 5]!
  const along = rx * ux + ry * uy + rz * uz
  const kx = ry * uz - rz * uy
  const ky = rz * ux - rx * uz
  const kz = rx * uy - ry * ux
  const lateral = kx * kx + ky * ky + kz * kz + extra
  // where the second line begins, seen from the start of the first
  const s = 0.5 * (l - m) - along
  const d = lateral > 1e-24 * (along * along + l * l) ? Math.sqrt(lateral) : 0
  return (f(s + m, d) - f(s, d) - f(s + m - l, d) + f(s - l, d)) / (l * m)
}

/** Second integral of 1/√(z² + d²); on one line the terms linear in |z| cancel. */
function f(z: number, d: number): number {
  const x = Math.abs(z)
  if (d > 0) {
    const r = Math.sqrt(x * x + d * d)
    return x * Math.log((x + r) / d) - r
  }
  return x > 0 ? x * Math.log(x) : 0
}

/**
 * 2 x · atanh(m / r), r the sum of two distances to the ends of a line of length m. Where the factor is nothing, or so
 * small that r is m to all digits (a point on the line), the term is nothing.
 */
const logTerm = (x: number, m: number, r: number): number =>
  x !== 0 && r > m ? x * Math.log((r + m) / (r - m)) : 0

function skewMean(a: Float64Array, p: number, b: Float64Array, q: number, c: number, extra: number): number {
  const l = a[p + 6]!
  const m = b[q + 6]!
  const ux = a[p + 3]!
  const uy = a[p + 4]!
  const uz = a[p + 5]!
  const vx = b[q + 3]!
  const vy = b[q + 4]!
  const vz = b[q + 5]!
  const wx = a[p]! - b[q]!
  const wy = a[p + 1]! - b[q + 1]!
  const wz = a[p + 2]! - b[q + 2]!
  const wu = wx * ux + wy * uy + wz * uz
  const wv = wx * vx + wy * vy + wz * vz
  const nx = uy * vz - uz * vy
  const ny = uz * vx - ux * vz
  const nz = ux * vy - uy * vx
  const s2 = nx * nx + ny * ny + nz * nz
  const across = wx * nx + wy * ny + wz * nz
  const d2 = (across * across) / s2 + extra
  // places of the four ends, counted from the common perpendicular
  const x0 = (wu - c * wv) / s2
  const y0 = (c * wu - wv) / s2
  const x1 = x0 + l
  const y1 = y0 + m
  const r11 = Math.sqrt(Math.max(0, x1 * x1 + y1 * y1 - 2 * x1 * y1 * c + d2))
  const r10 = Math.sqrt(Math.max(0, x1 * x1 + y0 * y0 - 2 * x1 * y0 * c + d2))
  const r01 = Math.sqrt(Math.max(0, x0 * x0 + y1 * y1 - 2 * x0 * y1 * c + d2))
  const r00 = Math.sqrt(Math.max(0, x0 * x0 + y0 * y0 - 2 * x0 * y0 * c + d2))
  let sum =
    logTerm(x1, m, r11 + r10) +
    logTerm(y1, l, r11 + r01) -
    logTerm(x0, m, r01 + r00) -
    logTerm(y0, l, r10 + r00)
  const size = x1 * x1 + y1 * y1 + l * l
  if (d2 > 1e-24 * size) {
    const d = Math.sqrt(d2)
    const s = Math.sqrt(s2)
    // each angle lies within ±π/2, so a difference of two is one arc tangent
    const k = d2 * c
    const ds = d * s
    const upper = angleBetween(k + x1 * y1 * s2, ds * r11, k + x1 * y0 * s2, ds * r10)
    const lower = angleBetween(k + x0 * y1 * s2, ds * r01, k + x0 * y0 * s2, ds * r00)
    sum -= (d / s) * (upper - lower)
  }
  return sum / (l * m)
}

const angleBetween = (y: number, x: number, y0: number, x0: number): number =>
  Math.atan2(y * x0 - x * y0, x * x0 + y * y0)
