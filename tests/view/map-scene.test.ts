import { expect, test } from 'vitest'
import { mapScene, sceneBounds } from '../../src/view/map-scene.js'
import { fitWindow } from '../../src/view/map-window.js'
import { gridText, mapFrame, options, tube } from './map-signs.js'

test('the face is a faint outline behind everything', () => {
  const outlined = mapScene(
    {
      title: '',
      units: 'mm',
      altitude: 0,
      face: { metal: 'grounded', size: [0.18, 0.08] },
      tubes: [],
      lead: { conductor: 0.001, diameter: 0.007, permittivity: 3, height: 0.02 },
      supplies: [],
      metal: [],
      wiring: { circuits: [] },
      routes: [],
      variants: [],
      rules: [],
      assumed: [],
    },
    [
      tube('A', [
        [-15, 30],
        [100, 30],
      ]),
    ],
  )
  const window = fitWindow(sceneBounds(outlined), 24, 6)
  const frame = (charset: 'box' | 'ascii') =>
    gridText(mapFrame(outlined, () => 0, window, options({ charset }))).map((row) => row.trimEnd())
  expect(frame('box')).toEqual([
    '',
    '   ┼┈┈┈┈┈┈┈┈┈┈┈┈┈┈┈┈┈┼',
    '  [──────────]       ┊',
    '   ┊                 ┊',
    '   ┼┈┈┈┈┈┈┈┈┈┈┈┈┈┈┈┈┈┼',
    '',
  ])
  expect(frame('ascii')).toEqual([
    '',
    '   .. . . . . . . . ..',
    '  [----------]       .',
    '   .                 .',
    '   .. . . . . . . . ..',
    '',
  ])
})
