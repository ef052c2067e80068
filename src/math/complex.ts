/** Complex numbers for the few places where one is handled alone; kernels keep split real and imaginary arrays. */
export interface Complex {
  readonly re: number
  readonly im: number
}

export const magnitude = (z: Complex): number => Math.hypot(z.re, z.im)
export const degrees = (z: Complex): number => (Math.atan2(z.im, z.re) * 180) / Math.PI
export const plus = (a: Complex, b: Complex): Complex => ({ re: a.re + b.re, im: a.im + b.im })
export const minus = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im })
export const times = (a: Complex, b: Complex): Complex => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
})
export const scaled = (a: Complex, k: number): Complex => ({ re: a.re * k, im: a.im * k })
export const over = (a: Complex, b: Complex): Complex => {
  const d = b.re * b.re + b.im * b.im
  return { re: (a.re * b.re + a.im * b.im) / d, im: (a.im * b.re - a.re * b.im) / d }
}
