import { expect, test } from 'vitest'
import { fixedBodies } from '../../src/geometry/bodies.js'
import { fixedNodes } from '../../src/geometry/nodes.js'
import { twoTubes } from '../rules/signs.js'

test('the last node of every tube lies at its whole length, to the last bit', () => {
  const layout = twoTubes()
  const tube = layout.tubes[0]!
  let uneven = 0
  for (let mm = 100; mm < 1500; mm++) {
    const path = [tube.path[0]!, { ...tube.path[0]!, x: tube.path[0]!.x + mm / 1000 }]
    const bodies = fixedBodies({ ...layout, tubes: [{ ...tube, path }], metal: [] })
    const body = bodies[0]!
    if (body.kind !== 'tube') throw new Error('no tube')
    const { at } = fixedNodes(bodies, false).tubes[0]!
    const pieces = at.length - 1
    if ((body.line.length * pieces) / pieces !== body.line.length) uneven++
    expect(at[pieces]).toBe(body.line.length)
  }
  // where a plain division would have missed it
  expect(uneven).toBeGreaterThan(10)
})
