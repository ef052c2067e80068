/** What a map shows beside the conductors: outlines of sheets, terminals, and how far it all reaches. Metres. */
import type { Body, Polyline } from '../geometry/conductors.js'
import { polyline } from '../geometry/polyline.js'
import type { Layout, PathPoint, Point } from '../layout/layout.js'
import type { Bounds } from './map-window.js'

export interface SceneTerminal {
  /** `S1.1` */
  readonly end: string
  readonly supply: string
  /** `1` or `2` */
  readonly glyph: string
  readonly x: number
  readonly y: number
}

export interface MapScene {
  /** tubes, bars and leads, in the order in which results speak of them */
  readonly bodies: readonly Body[]
  /** the face, plates and upright walls, seen from the front */
  readonly outlines: readonly Polyline[]
  readonly terminals: readonly SceneTerminal[]
}

/** The scene of a layout with these conductors. */
export function mapScene(layout: Layout, bodies: readonly Body[]): MapScene {
  const sheets = layout.metal.flatMap((metal) => {
    if (metal.kind === 'plate') return [rectangle(...metal.corners)]
    return metal.kind === 'wall' ? [polyline(metal.path.map(flat))] : []
  })
  const { size } = layout.face
  const face = size === undefined ? [] : [rectangle({ x: 0, y: 0 }, { x: size[0], y: size[1] })]
  const terminals = layout.supplies.flatMap(({ id, terminals }) =>
    terminals.map(({ x, y }, k) => ({ end: `${id}.${k + 1}`, supply: id, glyph: String(k + 1), x, y })),
  )
  return { bodies, outlines: [...face, ...sheets], terminals }
}

const flat = ({ x, y }: PathPoint): Point => [x, y, 0]

const rectangle = (a: PathPoint, b: PathPoint): Polyline =>
  polyline([flat(a), [b.x, a.y, 0], flat(b), [a.x, b.y, 0], flat(a)])

/** The rectangle round everything in the scene; a metre square where there is nothing. */
export function sceneBounds({ bodies, outlines, terminals }: MapScene): Bounds {
  let left = Infinity
  let top = Infinity
  let right = -Infinity
  let bottom = -Infinity
  const reach = (x: number, y: number) => {
    left = Math.min(left, x)
    top = Math.min(top, y)
    right = Math.max(right, x)
    bottom = Math.max(bottom, y)
  }
  for (const { points } of [...bodies.map(({ line }) => line), ...outlines])
    for (let p = 0; p < points.length; p += 3) reach(points[p]!, points[p + 1]!)
  for (const { x, y } of terminals) reach(x, y)
  return left > right ? { left: 0, top: 0, right: 1, bottom: 1 } : { left, top, right, bottom }
}
