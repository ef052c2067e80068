/** Capacitance of a thin rectangular sheet to its surroundings. */
import { factorCholesky, solveLowerRows } from '../math/dense.js'
import { fourPiEpsilon } from './constants.js'

/** patches along half of each side */
const patches = 8

/** Integral of 1/R over the rectangle with corners (x0, y0) and (x1, y1), seen from the origin in its plane. */
function rectangleIntegral(x0: number, x1: number, y0: number, y1: number): number {
  const g = (x: number, y: number): number => {
    // x asinh(y/x) + y asinh(x/y), where a vanishing factor takes its term with it
    const along = x === 0 ? 0 : x * Math.asinh(y / Math.abs(x))
    return y === 0 ? along : along + y * Math.asinh(x / Math.abs(y))
  }
  return g(x1, y1) - g(x0, y1) - g(x1, y0) + g(x0, y0)
}

/** Edges of the patches of one half side, finer towards the rim where the charge crowds. */
const edges = (half: number): number[] =>
  Array.from({ length: patches + 1 }, (_, k) => half * Math.sin((Math.PI * k) / (2 * patches)))

/**
 * Capacitance of a sheet of these sides, F. A quarter of it carries patches of uniform charge, the other three their
 * mirror images; matched at the patch centres and symmetrised.
 */
export function plateCapacitance(width: number, height: number): number {
  const xs = edges(width / 2)
  const ys = edges(height / 2)
  const count = patches * patches
  const potential = new Float64Array(count * count)
  for (let i = 0; i < count; i++) {
    const x = (xs[i % patches]! + xs[(i % patches) + 1]!) / 2
    const y = (ys[Math.floor(i / patches)]! + ys[Math.floor(i / patches) + 1]!) / 2
    for (let j = 0; j < count; j++) {
      const [x0, x1] = [xs[j % patches]!, xs[(j % patches) + 1]!]
      const [y0, y1] = [ys[Math.floor(j / patches)]!, ys[Math.floor(j / patches) + 1]!]
      let sum = 0
      for (const sx of [1, -1])
        for (const sy of [1, -1]) sum += rectangleIntegral(x0 - sx * x, x1 - sx * x, y0 - sy * y, y1 - sy * y)
      const mean = sum / (4 * (x1 - x0) * (y1 - y0))
      potential[i * count + j]! += mean / 2
      potential[j * count + i]! += mean / 2
    }
  }
  if (!factorCholesky(potential, count)) throw new Error('sheet coefficients are not positive definite')
  const solved = new Float64Array(count).fill(1)
  solveLowerRows(potential, count, solved, 1)
  return fourPiEpsilon * solved.reduce((sum, x) => sum + x * x, 0)
}
