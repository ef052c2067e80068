import { expect, test } from 'vitest'
import { loadingBriefly, loadingClause, loadingFigures, loadingRow } from '../../src/view/loading-text.js'

const lead = { by: 'lead', value: 0.254, limit: 0.9144, share: 0.254 / 0.9144, verdict: 'within' } as const

test('lengths of leads are told in the units of the layout', () => {
  expect(loadingRow(lead, 'in')).toBe('longest output lead 10.00 in:  28 % of the allowed 36.00 in')
  expect(loadingRow(lead, 'mm')).toBe('longest output lead 254 mm:  28 % of the allowed 914 mm')
  expect(loadingClause(lead, 'in')).toBe('has an output lead of 10.00 in; its leads allow 36.00 in')
  expect(loadingFigures(lead, 'in')).toBe('10.00/36.00in')
  expect(loadingBriefly(lead)).toBe('lead 28 % of its limit')
})
