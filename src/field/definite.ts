/** Factors of coefficient matrices that should be positive definite, and nearly always are. */
import { factorCholesky } from '../math/dense.js'

/**
 * Cholesky factor of a matrix of coefficients of potential, and the rows that had to be isolated for it. Pairs of
 * conductors that the drawing has inside each other are moved apart one pair at a time, and a path may turn back on
 * itself by almost 180°: then no real arrangement belongs to the matrix, and it can be indefinite. The segments that
 * make it so lose what they have in common with those after them; the rest stays as it is.
 */
export function definiteFactor(
  potential: Float64Array,
  count: number,
): { factor: Float64Array; isolated: readonly number[] } {
  const factor = potential.slice()
  if (factorCholesky(factor, count)) return { factor, isolated: [] }
  factor.set(potential)
  const isolated: number[] = []
  if (!factorCholesky(factor, count, isolated)) throw new Error('coefficients of potential are not numbers')
  return { factor, isolated }
}
