/** Every wiring of signs of four and five tubes by the full solution, beside the ranking of the search. */
import { describe, expect, it } from 'vitest'
import { rankOfBest } from '../rewire/brute-force.js'
import { row } from '../rewire/signs.js'

describe('the first proposal is the best of all wirings', () => {
  it.each([1, 2, 3, 4, 5, 6, 7, 8])(
    'four tubes, sign %i',
    (seed) => {
      const rank = rankOfBest(row({ tubes: 4, seed, grounding: seed % 2 === 0 ? 'midpoint' : 'one-end' }))
      console.log(`four tubes, sign ${seed}: the cheap ranking has the best of 384 at place ${rank + 1}`)
      expect(rank).toBeLessThan(24)
    },
    60_000,
  )

  it.each([1, 2, 3])(
    'five tubes, sign %i',
    (seed) => {
      const rank = rankOfBest(row({ tubes: 5, seed }))
      console.log(`five tubes, sign ${seed}: the cheap ranking has the best of 3840 at place ${rank + 1}`)
      expect(rank).toBeLessThan(24)
    },
    300_000,
  )
})
