/** Plates and walls in the solved network: grounded ones at 0 V, floating ones without charge. */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { inspection, networkSolver, prepare } from '../../src/inspection.js'
import { parseLayout } from '../../src/layout/parse.js'
import { nodeMix, probe, rmsPotential } from '../../src/network/potentials.js'
import { strayShares } from '../../src/network/stray.js'

function solvedSign(name: string) {
  const path = new URL(`../../layouts/${name}.yaml`, import.meta.url)
  const { layout } = parseLayout(readFileSync(path, 'utf8'), name)
  if (!layout) throw new Error(`${name} does not parse`)
  const prepared = prepare(layout)
  return { prepared, ...networkSolver(prepared)(layout.wiring) }
}

/** Σ_j C_ij V_j as a phasor, C rms. */
function chargeOf({ net, nominal }: ReturnType<typeof solvedSign>, node: number) {
  const { count, matrix } = net.capacitance
  const field = nominal.fields[0]!
  let [re, im, size] = [0, 0, 0]
  for (let j = 0; j < count; j++) {
    const c = matrix[node * count + j]!
    re += c * field.re[j]!
    im += c * field.im[j]!
    size += Math.abs(c) * Math.hypot(field.re[j]!, field.im[j]!)
  }
  return { re, im, size }
}

describe.each(['channel-letters', 'conversion-gone-wrong'])('%s', (name) => {
  const sign = solvedSign(name)
  const { prepared, net, nominal } = sign
  const { floating } = strayShares(net, nominal)

  it('grounded sheets stand at 0 V, floating ones carry no charge', () => {
    const field = nominal.fields[0]!
    prepared.sheets.forEach(({ grounded }, k) => {
      const node = prepared.nodes.firstSheet + k
      if (grounded) expect(Math.hypot(field.re[node]!, field.im[node]!)).toBe(0)
      else {
        const { re, im, size } = chargeOf(sign, node)
        expect(Math.hypot(re, im)).toBeLessThan(1e-6 * size)
      }
    })
  })
  it('each floating sheet is listed, with the potential that any place of it reads', () => {
    const free = prepared.sheets.filter(({ grounded }) => !grounded)
    expect(floating.map(({ id }) => id)).toEqual(free.map(({ name }) => name))
    const read = probe(
      prepared.layout.wiring,
      prepared.layout.tubes.map(({ id }) => id),
      prepared.nodes,
    )
    prepared.sheets.forEach(({ name }, index) => {
      const volts = rmsPotential(nominal.fields, nodeMix(read, { kind: 'sheet', index }, 0))
      expect(volts).toBeCloseTo(floating.find(({ id }) => id === name)?.voltage ?? 0, 9)
    })
  })
  it('touch current is what drives the sheet to where it floats: about ω C V of the sheet', () => {
    const node = net.floating[0]!.node
    const own = net.capacitance.matrix[node * (net.capacitance.count + 1)]!
    const { frequency } = nominal.fields[0]!
    // the columns give way a little when the sheet is held
    const { touch, voltage } = floating[0]!
    expect(Math.abs(touch! / (2 * Math.PI * frequency * own * voltage) - 1)).toBeLessThan(0.05)
  })
  it('pairs with sheets are judged as pairs with metal', () => {
    const { pairs } = inspection(prepared, prepared.layout.wiring)
    const withSheets = pairs.filter(({ a, b }) => [a, b].some(({ body }) => body.kind === 'sheet'))
    expect(withSheets.length).toBeGreaterThan(0)
    for (const { kind, a, b } of withSheets) {
      expect(kind).toMatch(/^(tube|lead)-metal$/)
      expect(prepared.sheets.map((sheet) => sheet.name)).toContain(b.part)
      expect(a.kind).not.toBe('metal')
    }
  })
})
