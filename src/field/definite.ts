/** Factors of coefficient matrices that should be positive definite, and nearly always are. */
import { factorCholesky } from '../math/dense.js'

/**
 * Cholesky factor of a matrix of coefficients of potential, and the rows whose self term had to be raised for it (in
 * `potential` too). Pairs of conductors that the drawing has inside each other are moved apart one pair at a time, and
 * a path may turn back on itself by almost 180°: then no real arrangement belongs to the matrix, and it can be
 * indefinite. The segments that make it so are raised step by step, which takes some charge off them and leaves the
 * rest alone.
 */
export function definiteFactor(
  potential: Float64Array,
  count: number,
): { factor: Float64Array; raised: readonly number[] } {
  const raised = new Set<number>()
  for (let share = 0.1; ; share *= 1.5) {
    const factor = potential.slice()
    const weak: number[] = []
    if (!factorCholesky(factor, count, weak)) throw new Error('coefficients of potential are not numbers')
    if (weak.length === 0) return { factor, raised: [...raised] }
    for (const i of weak) raised.add(i)
    for (const i of raised) potential[i * (count + 1)]! += share * Math.abs(potential[i * (count + 1)]!)
  }
}
