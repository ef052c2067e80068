/** Gauss–Legendre quadrature on −1 … 1, with weights that add up to 1: means, not integrals. */
export interface GaussRule {
  readonly places: Float64Array
  readonly weights: Float64Array
}

function made(count: number): GaussRule {
  const places = new Float64Array(count)
  const weights = new Float64Array(count)
  for (let k = 0; k < count; k++) {
    let x = Math.cos((Math.PI * (k + 0.75)) / (count + 0.5))
    let slope = 1
    for (let step = 0; step < 50; step++) {
      // Legendre polynomial by its recurrence, and its derivative
      let before = 1
      let value = x
      for (let n = 2; n <= count; n++)
        [before, value] = [value, ((2 * n - 1) * x * value - (n - 1) * before) / n]
      slope = (count * (x * value - before)) / (x * x - 1)
      const change = value / slope
      x -= change
      if (Math.abs(change) < 1e-15) break
    }
    places[k] = x
    weights[k] = 1 / ((1 - x * x) * slope * slope)
  }
  return { places, weights }
}

const rules: (GaussRule | undefined)[] = []

/** The rule of this many places. */
export function gaussRule(count: number): GaussRule {
  const rule = rules[count] ?? made(count)
  rules[count] = rule
  return rule
}
