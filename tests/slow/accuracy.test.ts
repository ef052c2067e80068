/**
 * The accuracy that the README states: kV and mA of the lit solution against the same sign with segments a quarter as
 * long and up to twelve harmonics (25 unknown charges) on every close conductor. This checks the discretisation, not
 * the model; agreement/ and field/ check the model.
 */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { fineField, usualField } from '../../src/field/fixed-field.js'
import { prepare, solver } from '../../src/inspection.js'
import { parseLayout } from '../../src/layout/parse.js'
import type { CircuitSolution, PotentialField } from '../../src/network/solution.js'

const signs = [
  'open-window',
  'script-word',
  'fascia-border',
  'conversion-gone-wrong',
  'feed-moved',
  'core-and-coil-6kv',
  'reference-12-tubes',
]

function solvedBy(name: string, options: typeof usualField) {
  const path = `layouts/${name}.yaml`
  const { layout } = parseLayout(readFileSync(path, 'utf8'), path)
  if (!layout) throw new Error(`${path} does not parse`)
  return solver(prepare(layout), options)(layout.wiring)
}

/** largest difference of any node potential, over the largest potential of that field */
function voltageError(one: readonly PotentialField[], other: readonly PotentialField[]): number {
  return Math.max(
    ...one.map((field, k) => {
      const fine = other[k]!
      let most = 0
      let peak = 0
      for (let i = 0; i < field.re.length; i++) {
        most = Math.max(most, Math.hypot(field.re[i]! - fine.re[i]!, field.im[i]! - fine.im[i]!))
        peak = Math.max(peak, Math.hypot(fine.re[i]!, fine.im[i]!))
      }
      return most / peak
    }),
  )
}

/** largest difference of any column or terminal current, over the largest current */
function currentError(one: CircuitSolution, other: CircuitSolution): number {
  let most = 0
  let peak = 0
  for (const [tube, column] of one.columns) {
    const fine = other.columns.get(tube)!
    for (let i = 0; i < column.re.length; i++) {
      most = Math.max(most, Math.hypot(column.re[i]! - fine.re[i]!, column.im[i]! - fine.im[i]!))
      peak = Math.max(peak, Math.hypot(fine.re[i]!, fine.im[i]!))
    }
  }
  for (const k of [0, 1] as const) {
    const [a, b] = [one.terminalCurrent[k], other.terminalCurrent[k]]
    most = Math.max(most, Math.hypot(a.re - b.re, a.im - b.im))
  }
  return most / peak
}

describe('the usual segments against quarter-length ones', () => {
  it.each(signs)('%s: kV and mA within one per cent', { timeout: 240_000 }, (name) => {
    const usual = solvedBy(name, usualField)
    const fine = solvedBy(name, fineField)
    const volts = voltageError(usual.lit.nominal, fine.lit.nominal)
    const currents = usual.outcomes.map((outcome, i) => {
      const other = fine.outcomes[i]!
      expect(outcome.lit).toBe(other.lit)
      return outcome.lit && other.lit ? currentError(outcome, other) : 0
    })
    process.stderr.write(
      `${name}: kV ${(100 * volts).toFixed(3)} %, mA ${(100 * Math.max(...currents)).toFixed(3)} %\n`,
    )
    expect(usual.lit.nominal.length).toBeGreaterThan(0)
    expect(volts).toBeLessThan(0.01)
    expect(Math.max(...currents)).toBeLessThan(0.01)
  })
})
