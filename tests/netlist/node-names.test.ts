import fc from 'fast-check'
import { expect, test } from 'vitest'
import { nodeNames } from '../../src/netlist/node-names.js'

const tubeOf = (first: number, ...mm: number[]) => ({ first, at: Float64Array.from(mm, (x) => x / 1000) })

test('names say the place on the glass, the metal, and the two ends of a lead', () => {
  const nodes = {
    tubes: [tubeOf(0, 0, 45.4, 90.8), tubeOf(3, 0, 30)],
    firstBar: 5,
    bars: 1,
    firstSheet: 6,
    sheets: 0,
    face: 6,
    count: 7,
  }
  const leads: [string, string][] = [
    ['S1.1', 'K.a'],
    ['K.b', 'Ö.b'],
    ['Ö.a', 'S1.2'],
  ]
  expect(nodeNames(nodes, { tubes: ['K', 'Ö'], metal: ['old frame'], leads })).toEqual([
    ...['K_0', 'K_45', 'K_e', 'O_0', 'O_e', 'M_old_frame', 'face'],
    ...['L_S1_1_K_a', 'L_K_b_O_b', 'L_O_a_S1_2'],
  ])
})

test('whatever the ids are: letters, digits and _ only, a letter first, and no name twice in a program blind to capitals', () => {
  const anyId = fc.oneof(
    fc.string({ minLength: 1 }),
    fc.constantFrom('K', 'k', 'K_2', 'ö', 'O', '0', '.inf', 'a\n.b', '"'),
  )
  fc.assert(
    fc.property(
      fc.array(anyId, { minLength: 1, maxLength: 6 }),
      fc.array(anyId, { maxLength: 3 }),
      (tubes, bars) => {
        const nodes = {
          // places less than a millimetre apart have the same figure
          tubes: tubes.map((_, t) => tubeOf(3 * t, 0, 0.3, 0.6)),
          firstBar: 3 * tubes.length,
          bars: bars.length,
          firstSheet: 3 * tubes.length + bars.length,
          sheets: 0,
          count: 3 * tubes.length + bars.length,
        }
        const leads = tubes.map((id): [string, string] => [`${id}.a`, `${id}.b`])
        const names = nodeNames(nodes, { tubes, metal: bars, leads })
        expect(names.length).toBe(nodes.count + leads.length)
        for (const name of names) expect(name).toMatch(/^[A-Za-z][A-Za-z0-9_]*$/)
        expect(new Set(names.map((name) => name.toLowerCase())).size).toBe(names.length)
      },
    ),
  )
})
