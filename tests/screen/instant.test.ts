/** What instant 0 is. */
import { expect, test } from 'vitest'
import { nodeMix, rmsPotential } from '../../src/network/potentials.js'
import { instantAt, instantShown } from '../../src/screen/instant.js'
import { session } from './session.js'

const terminalOne = (name: string, edit: (s: ReturnType<typeof session>) => void, supply: string) => {
  const s = session(name, { columns: 120, rows: 40 })
  edit(s)
  const { inspection, condition } = s.state()
  const circuit = inspection.wiring.circuits.findIndex((c) => c.supply === supply)
  const lead = inspection.places.findIndex((place) => place.circuit === circuit)
  const mix = nodeMix(inspection.probe, { kind: 'lead', index: lead }, 0)
  const shown = instantShown(s.state())
  expect(condition).toBe('lit')
  return { shown, now: instantAt(shown, mix), peak: Math.SQRT2 * rmsPotential(shown.fields, mix) }
}

test('the instant counts from the peak of terminal 1 of the first supply', () => {
  const { now, peak } = terminalOne('open-window', () => undefined, 'S1')
  expect(now / peak).toBeCloseTo(1, 9)
})

test('where the first circuit is dark, of the first that burns', () => {
  const darken = (s: ReturnType<typeof session>) => {
    s.keys('e')
    s.send({ type: 'picked', value: 'S1' })
    s.send({ type: 'picked', value: 'no_load_kv' })
    s.type('2')
    // behind its reactance terminal 1 of the other is not in step with its source
    s.keys('e')
    s.send({ type: 'picked', value: 'S2' })
    s.send({ type: 'picked', value: 'type' })
    s.send({ type: 'picked', value: 'core-and-coil' })
    s.keys('e')
    s.send({ type: 'picked', value: 'S2' })
    s.send({ type: 'picked', value: 'frequency_hz' })
    s.type('60')
    expect(s.state().inspection.circuits.map(({ lit }) => lit)).toEqual([false, true])
  }
  const { shown, now, peak } = terminalOne('reference-12-tubes', darken, 'S2')
  expect(shown.fields.map(({ supply }) => supply)).toEqual(['S2'])
  expect(now / peak).toBeCloseTo(1, 9)
})
