/**
 * One tube with distributed capacitance against closed forms and 40-digit values computed for the project's
 * physics page [C]: R′ = 25 kΩ/m, C′ = 20 pF/m, 24 kHz, 20 mA; terminal 2 grounded, or balanced about ground.
 */
import { describe, expect, test } from 'vitest'
import type { Grounding } from '../../src/layout/layout.js'
import type { Complex } from '../../src/math/complex.js'
import { minus } from '../../src/math/complex.js'
import { solveLit } from '../../src/network/lit.js'
import type { Network } from '../../src/network/network.js'
import type { ColumnCurrents } from '../../src/network/solution.js'
import { capacitors, networkOf, sketch, supplyOf, wired } from './signs.js'

const times = (a: Complex, b: Complex): Complex => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
})
const over = (a: Complex, b: Complex): Complex => {
  const { re, im } = times(a, { re: b.re, im: -b.im })
  const size = b.re * b.re + b.im * b.im
  return { re: re / size, im: im / size }
}

/**
 * `sections` pi sections from terminal to terminal, each R = ohms · |I|^(−exponent) a metre: the electrodes are the
 * first and the last of them, so that terminals are the ends of the line.
 */
function uniform(
  length: number,
  sections: number,
  grounding: Grounding,
  ohms: number,
  exponent: number,
): Network {
  const supply = supplyOf('S', { grounding, noLoadVoltage: 1e6, shortCircuitCurrent: 0.02 })
  const piece = length / sections
  const parts = sketch([{ id: 'K', length: length - 2 * piece }], [supply], [wired('S', 'K')], {
    spacing: piece,
  })
  const { capacitance, connect } = capacitors(parts.nodes.count + 2)
  const { node } = networkOf(parts, capacitance)
  for (let k = 0; k < sections; k++) {
    connect(node[k]!, undefined, (20e-12 * piece) / 2)
    connect(node[k + 1]!, undefined, (20e-12 * piece) / 2)
  }
  const net = networkOf(parts, capacitance)
  return {
    ...net,
    coefficient: net.coefficient.map((k) => (k === 0 ? 0 : ohms * piece)),
    exponent: net.exponent.map(() => exponent),
  }
}

function solved(net: Network) {
  const state = solveLit(net, { factor: 1 })
  const circuit = state.circuits[0]!
  if (!circuit.lit) throw new Error(`not lit: ${circuit.why}`)
  const [one, two] = circuit.terminalVoltage
  const [current, back] = circuit.terminalCurrent
  const column = circuit.columns.get(0)!
  return { input: over(minus(one, two), current), current, back, column, voltage: minus(one, two) }
}

const flow = (column: ColumnCurrents, k: number): Complex => ({ re: column.re[k]!, im: column.im[k]! })
const size = ({ re, im }: Complex) => Math.hypot(re, im)

// complex functions by their definitions
const root = (z: Complex): Complex => {
  const r = Math.sqrt(size(z))
  const angle = Math.atan2(z.im, z.re) / 2
  return { re: r * Math.cos(angle), im: r * Math.sin(angle) }
}
const sinh = ({ re, im }: Complex): Complex => ({
  re: Math.sinh(re) * Math.cos(im),
  im: Math.cosh(re) * Math.sin(im),
})
const cosh = ({ re, im }: Complex): Complex => ({
  re: Math.cosh(re) * Math.cos(im),
  im: Math.sinh(re) * Math.sin(im),
})
const asinh = (z: Complex): Complex => {
  const s = root(plusOne(times(z, z)))
  const w = { re: z.re + s.re, im: z.im + s.im }
  return { re: Math.log(size(w)), im: Math.atan2(w.im, w.re) }
}
const plusOne = ({ re, im }: Complex): Complex => ({ re: 1 + re, im })

/** Ladder of N pi sections, far end grounded: Z_in = z tanh(Nθ)/sinh θ, I_N/I_0 = 1/cosh Nθ, cosh θ = 1 + zy/2. */
function ladder(length: number, pieces: number) {
  const z = (25000 * length) / pieces
  const y = { re: 0, im: (2 * Math.PI * 24000 * 20e-12 * length) / pieces }
  // θ by 2 asinh(√(zy)/2): cosh θ = 1 + zy/2 without loss of digits
  const half = root({ re: 0, im: z * y.im })
  const theta = asinh({ re: half.re / 2, im: half.im / 2 })
  const whole = { re: theta.re * 2 * pieces, im: theta.im * 2 * pieces }
  const single = { re: theta.re * 2, im: theta.im * 2 }
  const input = over(times({ re: z, im: 0 }, over(sinh(whole), cosh(whole))), sinh(single))
  return { input, ratio: over({ re: 1, im: 0 }, cosh(whole)) }
}

describe('a uniform tube', () => {
  test.each([1, 3, 6])('of %i m in 40 sections is the exact ladder', (length) => {
    const { input, current, back } = solved(uniform(length, 40, 'one-end', 25000, 0))
    const exact = ladder(length, 40)
    // 1e-10: rounding and the solver's tolerance
    expect(size(over(minus(input, exact.input), exact.input))).toBeLessThan(1e-10)
    const ratio = over({ re: -back.re, im: -back.im }, current)
    expect(size(minus(ratio, exact.ratio))).toBeLessThan(1e-10)
  })

  const table: [number, Grounding, number, number, number, number?][] = [
    [1, 'one-end', 24981.0680125, -627.74075879, 0.999526588966],
    [3, 'one-end', 70718.570098, -15788.7548314, 0.963665667604, -19.0592578],
    [3, 'midpoint', 74713.55449, -4221.48106489, 0.997610116485],
    [6, 'one-end', 83216.3502835, -62455.7020461, 0.666736221279, -62.4219946],
    [6, 'midpoint', 141437.140196, -31577.5096628, 0.963665667604],
  ]
  test.each(table)(
    'of %i m fed %s converges to the table of 40-digit values',
    (length, grounding, re, im, ratio, angle) => {
      const at = (pieces: number) => {
        const { input, current, back, column } = solved(uniform(length, pieces, grounding, 25000, 0))
        // balanced: an odd number of pieces has one whose middle is the tube's
        const far = grounding === 'midpoint' ? flow(column, (pieces - 3) / 2) : { re: -back.re, im: -back.im }
        return { input, far: over(far, current) }
      }
      // second order in the piece: the error falls by nine from 27 to 81, and Richardson's step takes the rest
      const [coarse, fine] = [at(27), at(81)]
      const errorOf = (z: Complex) => Math.hypot(z.re - re, z.im - im) / Math.hypot(re, im)
      expect(errorOf(fine.input)).toBeLessThan(errorOf(coarse.input) / 8)
      const limit = (a: Complex, b: Complex): Complex => ({
        re: b.re + (b.re - a.re) / 8,
        im: b.im + (b.im - a.im) / 8,
      })
      expect(errorOf(limit(coarse.input, fine.input))).toBeLessThan(2e-7)
      const far = limit(coarse.far, fine.far)
      expect(size(far)).toBeCloseTo(ratio, 6)
      if (angle !== undefined) expect((Math.atan2(far.im, far.re) * 180) / Math.PI).toBeCloseTo(angle, 4)
    },
  )
})

describe('a falling column, E = 500 (I/20 mA)^−n V/m, far end grounded [C]', () => {
  const tube = (length: number, n: number, pieces: number) =>
    uniform(length, pieces, 'one-end', 500 * 0.02 ** n, 1 + n)

  test.each([
    [3, 0, 1491.986608, 19.219085924],
    [3, 0.2, 1501.52012, 19.206686948],
    [3, 0.4, 1511.439677, 19.193661633],
    [6, 0, 2297.412754, 3.809063673],
  ])('of %i m with n = %f converges to %f V and %f mA at the far end', (length, n, volts, far) => {
    const at = (pieces: number) => {
      const { voltage, back } = solved(tube(length, n, pieces))
      return [size(voltage), size(back) * 1000] as const
    }
    const [coarse, fine] = [at(40), at(120)]
    expect(fine[0] + (fine[0] - coarse[0]) / 8).toBeCloseTo(volts, length === 3 ? 4 : 2)
    expect(fine[1] + (fine[1] - coarse[1]) / 8).toBeCloseTo(far, length === 3 ? 5 : 2)
  })

  test.each([0.2, 0.4])('of 6 m with n = %f has no fully lit solution', (n) => {
    const state = solveLit(tube(6, n, 60), { factor: 1 })
    expect(state.circuits[0]).toMatchObject({ lit: false, dark: [0] })
    expect(state.circuits[0]).not.toHaveProperty('neededVoltage')
    expect(state.fields).toEqual([])
  })
})
