import { expect, test } from 'vitest'
import { circuitLeads } from '../../src/wiring/leads.js'

test('a string of n tubes has n + 1 leads, from terminal 1 to terminal 2, circuit after circuit', () => {
  const entry = (tube: string, reversed = false) => ({ tube, reversed })
  const leads = circuitLeads({
    circuits: [
      { supply: 'S1', string: [entry('K'), entry('I', true), entry('O')] },
      { supply: 'S2', string: [entry('Z', true)] },
    ],
  })
  expect(
    leads.map(({ circuit, place, role, between }) => `${circuit}.${place} ${role} ${between.join('–')}`),
  ).toEqual([
    '0.0 feed S1.1–K.a',
    '0.1 jumper K.b–I.b',
    '0.2 jumper I.a–O.a',
    '0.3 feed O.b–S1.2',
    '1.0 feed S2.1–Z.b',
    '1.1 feed Z.a–S2.2',
  ])
})
