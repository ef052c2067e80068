import { expect, test } from 'vitest'
import { toFix } from '../../src/rules/to-fix.js'
import { onPaper, twoTubes } from './signs.js'

test('what is to fix are pairs and circuits with that verdict, and nothing else', () => {
  const [fix, watch, within] = (['fix', 'watch', 'within'] as const).map((verdict) => ({ verdict }))
  if (!fix || !watch || !within) throw new Error('no verdicts')
  expect(toFix({ pairs: [], circuits: [] })).toBe(0)
  expect(toFix({ pairs: [fix, watch, fix, within], circuits: [watch, fix, within] })).toBe(3)
  // 10 mm at 6 kV is one pair to fix under the thumb, and it goes with the gap
  expect(toFix(onPaper(twoTubes({ gap: 10, kv: 6, type: 'core-and-coil', hertz: 50 })))).toBe(1)
  expect(toFix(onPaper(twoTubes({ gap: 100, kv: 6, type: 'core-and-coil', hertz: 50 })))).toBe(0)
})
