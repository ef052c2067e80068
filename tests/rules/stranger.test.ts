/** Faults that a bench technician found in use, each pinned. */
import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { inspection, prepare, solver } from '../../src/inspection.js'
import { parseLayout } from '../../src/layout/parse.js'
import { swapTerminals } from '../../src/wiring/edits.js'

function shipped(name: string, edit: (text: string) => string = (text) => text) {
  const path = `layouts/${name}.yaml`
  const { layout } = parseLayout(edit(readFileSync(path, 'utf8')), path)
  if (!layout) throw new Error(`${path} does not parse`)
  const prepared = prepare(layout)
  const solve = solver(prepared)
  return { layout, prepared, found: inspection(prepared, layout.wiring, solve(layout.wiring)), solve }
}

describe('swapping the terminals', () => {
  test('leaves the leads in their conduit: a midpoint-grounded sign is only mirrored', () => {
    const { layout, prepared, found, solve } = shipped('conversion-gone-wrong')
    const swapped = swapTerminals(layout.wiring, 0)
    if (!swapped.ok) throw new Error('refused')
    const after = inspection(prepared, swapped.value, solve(swapped.value))
    const [was, is] = [found.circuits[0]!, after.circuits[0]!]
    expect(after.leads.map((l) => l.conduit).sort()).toEqual(found.leads.map((l) => l.conduit).sort())
    expect(after.cautions.map((c) => c.code)).toContain('conduit')
    // the terminals lie a few centimetres apart: nearly, not exactly the same
    expect(Math.abs(is.stray! / was.stray! - 1)).toBeLessThan(0.05)
    expect(Math.abs(is.residual! / was.residual! - 1)).toBeLessThan(0.05)
  })
})

describe('a lead', () => {
  test('makes no pair with itself: it is at one potential', () => {
    for (const name of ['open-window', 'conversion-gone-wrong', 'reference-12-tubes']) {
      const { found } = shipped(name)
      expect(found.pairs.filter((p) => p.a.kind === 'lead' && p.a.part === p.b.part)).toEqual([])
    }
  })

  test('whose drawn route no longer reaches its end is said', () => {
    const { found } = shipped('open-window', (text) =>
      text.replace(/terminals: \[\[\d+, \d+/, 'terminals: [[20, 20'),
    )
    expect(found.cautions.map((c) => c.code)).toContain('route-misfit')
    expect(shipped('open-window').found.cautions.map((c) => c.code)).not.toContain('route-misfit')
  })
})

test('the stray of a circuit with a midpoint return is that of its halves: next to nothing at 50 Hz', () => {
  const { found } = shipped('channel-letters')
  const parts = found.circuits[0]!.tubes.reduce((sum, t) => sum + (t.stray ?? 0), 0)
  // what the tubes lose, and what their leads lose, is all there is
  const leads = found.circuits[0]!.leads.reduce((sum, l) => sum + (l.stray ?? 0), 0)
  expect(found.circuits[0]!.stray).toBeLessThanOrEqual(parts + leads)
  expect(found.circuits[0]!.stray).toBeLessThan(1e-4)
})

test('a core-and-coil transformer at 22 kHz is questioned', () => {
  const { found } = shipped('core-and-coil-6kv', (text) =>
    text.replace('frequency_hz: 60', 'frequency_hz: 22000'),
  )
  expect(found.cautions).toContainEqual({
    level: 'watch',
    code: 'frequency',
    supply: 'T1',
    type: 'core-and-coil',
    frequency: 22000,
  })
})

test('a bare electrode is the wire of its connection, much sharper than the glass', () => {
  const start = (boots: boolean) => {
    const { found } = shipped('feed-moved', (text) => text.replace('boots: true', `boots: ${boots}`))
    return found.pairs.find((p) => p.a.part === 'top2' && p.b.part === 'low2')!.air.startsAt
  }
  // Peek, two wires of 0.6 mm 15 mm apart: 2 E r ln(D/r), E = 24 (1 + 0.301/√0.06) kV/cm: 20.5 kV, times 0.80 at 26 kHz
  const peek = 0.8 * 2 * 24e5 * (1 + 0.301 / Math.sqrt(0.06)) * 0.6e-3 * Math.log(15.2 / 0.6)
  expect(start(true)).toBeGreaterThan(30_000)
  expect(start(false) / peek).toBeGreaterThan(0.85)
  expect(start(false) / peek).toBeLessThan(1.05)
})
