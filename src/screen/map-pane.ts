/** The map as a grid for the sink: the raster is kept per window and wiring, colours are laid over it at every frame. */
import { pointAt } from '../geometry/polyline.js'
import type { BodyRef } from '../geometry/runs.js'
import type { Inspection } from '../inspection.js'
import { nodeMix } from '../network/potentials.js'
import { bodyOf } from '../rules/passing.js'
import { type MapGrid, mapGrid, type PickedPlace } from '../view/map.js'
import { type Overlays, type Place, withOverlays } from '../view/map-overlay.js'
import { type MapRaster, mapRaster } from '../view/map-raster.js'
import { mapScene } from '../view/map-scene.js'
import { cellAt, inside, type MapWindow } from '../view/map-window.js'
import { potentialScale } from '../view/scale.js'
import { meanings, sgr, type Theme } from '../view/theme.js'
import { footsOfPair, footUnderCursor, mapWindow, placeOfCursor } from './aim.js'
import type { Box } from './frame.js'
import { instantAt, instantShown, peakPotential } from './instant.js'
import type { Foot, State } from './state.js'
import type { Grid } from './terminal/cells.js'

export interface MapPane {
  /** the map of a state at its place on the screen */
  grid(state: State, box: Box): Grid
}

/** Keeps what the cursor and the instant do not change: the raster, and the looks of meanings. */
export function mapPane(theme: Theme): MapPane {
  let kept: { inspection: Inspection; window: MapWindow; raster: MapRaster } | undefined
  const looks = new Map<number, string>()
  const look = (meaning: number, extra: number): string => {
    const key = meaning * 8 + extra
    const known = looks.get(key) ?? sgr(theme, meanings[meaning] ?? 'text', extra)
    looks.set(key, known)
    return known
  }

  function rasterOf(state: State, window: MapWindow): MapRaster {
    const { inspection } = state
    if (!kept || kept.inspection.leads !== inspection.leads || !sameWindow(kept.window, window)) {
      const { layout, bodies } = inspection.context
      kept = {
        inspection,
        window,
        raster: mapRaster(mapScene(layout, [...bodies, ...inspection.leads]), window),
      }
    }
    return kept.raster
  }

  return {
    grid(state, box) {
      const window = mapWindow(state)
      const shown = withOverlays(mapShown(state, rasterOf(state, window)), window, overlays(state, window))
      return {
        ...box,
        glyphs: shown.glyphs,
        styles: Array.from(shown.meanings, (meaning, cell) => look(meaning, shown.marks[cell]!)),
      }
    },
  }
}

const sameWindow = (a: MapWindow, b: MapWindow): boolean =>
  a.columns === b.columns &&
  a.rows === b.rows &&
  a.x === b.x &&
  a.y === b.y &&
  a.step === b.step &&
  a.mirrored === b.mirrored

/** The conductors at the instant shown, in the cursor's cell the one that is read out. */
export function mapShown(state: State, raster: MapRaster): MapGrid {
  const { inspection, view } = state
  const { bodies } = inspection.context
  const shown = instantShown(state)
  const picked = pickedPlace(state, raster.window)
  const refOf = (body: number): BodyRef =>
    body < bodies.length ? { kind: 'fixed', index: body } : { kind: 'lead', index: body - bodies.length }
  const potentialOf = (body: number, at: number): number | undefined => {
    const part = bodies[body]
    if (part?.kind === 'bar' && part.grounded) return undefined
    if (state.condition === 'lit' && inspection.unlitBodies.has(body)) return undefined
    return instantAt(shown, nodeMix(inspection.probe, refOf(body), at))
  }
  return mapGrid(raster, potentialOf, {
    scale: potentialScale(peakPotential(state)),
    charset: state.ascii ? 'ascii' : 'box',
    glyphs: view.glyphs,
    labels: view.names,
    ...(picked && { picked }),
  })
}

/** What the readout tells of, in the cell of the cursor. */
function pickedPlace(state: State, window: MapWindow): PickedPlace | undefined {
  const [place, foot] = [placeOfCursor(state), footUnderCursor(state)]
  const cell = place && cellAt(window, place.x, place.y)
  if (!cell || !foot || !inside(window, cell)) return undefined
  const { bodies } = state.inspection.context
  if (foot.body.kind !== 'fixed' && foot.body.kind !== 'lead') return undefined
  const body = foot.body.index + (foot.body.kind === 'lead' ? bodies.length : 0)
  return { cell: cell.row * window.columns + cell.column, body, at: foot.at }
}

/** The pair with the line between its places, or mark and cursor. */
function overlays(state: State, window: MapWindow): Overlays {
  const place = placeOfCursor(state)
  const cursor = place && cellAt(window, place.x, place.y)
  const pair = footsOfPair(state)
  if (pair) {
    const a = placeOf(state, pair.a)
    // the face has no place of its own: it lies behind the other part
    const b = placeOf(state, pair.b) ?? a
    return { ...(cursor && { cursor }), ...(a && b && { pair: [a, b] as const }) }
  }
  const mark = state.mark && placeOf(state, state.mark)
  if (!mark || !place) return cursor ? { cursor } : {}
  return { cursor: cursor ?? { column: -1, row: -1 }, probe: mark, pair: [mark, place] }
}

function placeOf(state: State, foot: Foot): Place | undefined {
  const body = bodyOf(state.inspection.context, foot.body)
  if (!body) return undefined
  const [x, y] = pointAt(body.line, foot.at)
  return { x, y }
}
