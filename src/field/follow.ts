/** Small steps on matrices whose rows are the charges of one lead. */

/** rows[l] −= Σ_h response[l][h] harmonics[h], rows of equal width: the lead's harmonics follow its charges. */
export function followCharges(
  rows: Float64Array,
  harmonics: Float64Array,
  width: number,
  response: Float64Array,
  charges: number,
): void {
  const count = harmonics.length / width
  for (let h = 0; h < count; h++) {
    const row = harmonics.subarray(h * width, (h + 1) * width)
    if (row.every((x) => x === 0)) continue
    for (let l = 0; l < charges; l++) {
      const share = response[l * count + h]!
      if (share === 0) continue
      for (let k = 0; k < width; k++) rows[l * width + k]! -= share * row[k]!
    }
  }
}

/** a −= b, element by element. */
export function subtract(a: Float64Array, b: Float64Array): void {
  for (let k = 0; k < a.length; k++) a[k]! -= b[k]!
}
