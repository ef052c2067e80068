/** Small invented signs for the tests of the map. Millimetres in, metres out. */
import type { Body } from '../../src/geometry/conductors.js'
import { polyline } from '../../src/geometry/polyline.js'
import { type MapGrid, type MapOptions, mapGrid, type PotentialOf } from '../../src/view/map.js'
import { mapRaster } from '../../src/view/map-raster.js'
import type { MapScene, SceneTerminal } from '../../src/view/map-scene.js'
import type { MapWindow } from '../../src/view/map-window.js'
import { potentialScale } from '../../src/view/scale.js'

export type Drawn = readonly (readonly [number, number])[]

const lineOf = (path: Drawn, z: number) => polyline(path.map(([x, y]) => [x / 1000, y / 1000, z / 1000]))

export const tube = (name: string, path: Drawn, z = 40): Body => ({
  kind: 'tube',
  name,
  line: lineOf(path, z),
  coreRadius: 0.005,
  outerRadius: 0.006,
  permittivity: 7,
  equivalentRadius: 0.0058,
  fill: 'neon',
  boots: true,
})

export const lead = (from: string, to: string, path: Drawn, z = 15): Body => ({
  kind: 'lead',
  name: `${from}–${to}`,
  between: [from, to],
  line: lineOf(path, z),
  coreRadius: 0.0006,
  outerRadius: 0.0035,
  permittivity: 3,
  equivalentRadius: 0.002,
  conduit: 'none',
  off: 0,
  assumed: false,
})

export const bar = (name: string, path: Drawn): Body => ({
  kind: 'bar',
  name,
  line: lineOf(path, 10),
  coreRadius: 0.005,
  outerRadius: 0.005,
  permittivity: 1,
  equivalentRadius: 0.005,
  grounded: true,
})

export const terminals = (one: Drawn[number], two: Drawn[number]): SceneTerminal[] =>
  [one, two].map(([x, y], k) => ({
    end: `S1.${k + 1}`,
    supply: 'S1',
    glyph: String(k + 1),
    x: x / 1000,
    y: y / 1000,
  }))

export const scene = (bodies: Body[], rest: Partial<MapScene> = {}): MapScene => ({
  bodies,
  outlines: [],
  terminals: [],
  ...rest,
})

/** An arc of an ellipse, angles in degrees clockwise from the right. */
export const arc = (cx: number, cy: number, rx: number, ry: number, from: number, to: number): Drawn =>
  Array.from({ length: 91 }, (_, k) => {
    const angle = ((from + ((to - from) * k) / 90) * Math.PI) / 180
    return [cx + rx * Math.cos(angle), cy + ry * Math.sin(angle)] as const
  })

/** A window with columns of 10 mm and rows of 20 mm whose first cell starts at (0, 0). */
export const plainWindow = (columns: number, rows: number): MapWindow => ({
  columns,
  rows,
  x: columns * 0.005,
  y: rows * 0.01,
  step: 0.01,
  aspect: 2,
  mirrored: false,
})

export const options = (rest: Partial<MapOptions> = {}): MapOptions => ({
  scale: potentialScale(6000),
  charset: 'box',
  glyphs: 'stroke',
  labels: false,
  ...rest,
})

/** The letter O with its ends at the top, a jumper leaving one of them, and a grounded bar below. */
export const letterO = scene(
  [
    tube('O', arc(105, 110, 80, 90, -75, 255)),
    lead('O.b', 'U.a', [
      [85, 24],
      [85, 5],
      [225, 5],
      [225, 210],
    ]),
    lead('S1.1', 'O.a', [
      [175, 230],
      [125, 230],
      [125, 24],
    ]),
    bar('rail', [
      [15, 250],
      [235, 250],
    ]),
  ],
  { terminals: terminals([175, 230], [225, 230]) },
)

/** The characters alone, one string a row. */
export const gridText = ({ columns, rows, glyphs }: MapGrid): string[] =>
  Array.from({ length: rows }, (_, row) => glyphs.slice(row * columns, (row + 1) * columns).join(''))

/** Both steps of a map at once. */
export const mapFrame = (
  drawn: MapScene,
  potentialOf: PotentialOf,
  window: MapWindow,
  asked: MapOptions,
): MapGrid => mapGrid(mapRaster(drawn, window), potentialOf, asked)
