/** Complex numbers for the few places where one is handled alone; kernels keep split real and imaginary arrays. */
export interface Complex {
  readonly re: number
  readonly im: number
}

export const magnitude = (z: Complex): number => Math.hypot(z.re, z.im)
export const degrees = (z: Complex): number => (Math.atan2(z.im, z.re) * 180) / Math.PI
export const plus = (a: Complex, b: Complex): Complex => ({ re: a.re + b.re, im: a.im + b.im })
export const minus = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im })
