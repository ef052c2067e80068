/**
 * The nodes of the network: where potentials are unknown.
 *
 * Order, everywhere a node index or a node matrix appears:
 *   the column nodes of every tube (tube after tube, from end a to end b),
 *   one node for each bar (grounded ones too: the network holds those at 0 V),
 *   one node for each sheet (plates and walls) in the same way,
 *   one node for the face if it floats,
 *   one node for each lead of the wiring.
 * A lead's node is also the electrode (and supply terminal) potential at both its ends: between the electrode and
 * the first column node of a tube lies half the electrode pair's drop.
 */
import type { FixedBody } from './conductors.js'

/** longest stretch of column between two nodes, m (physics: 50 mm of path) */
export const nodeSpacing = 0.05

export interface ColumnNodes {
  /** index of the node at end a */
  readonly first: number
  /** path length of each node from end a, m; the first is 0, the last the length of the tube */
  readonly at: Float64Array
}

export interface FixedNodes {
  /** in the order of the tubes among the fixed bodies */
  readonly tubes: readonly ColumnNodes[]
  /** index of the node of the first bar; bars follow in order */
  readonly firstBar: number
  readonly bars: number
  /** index of the node of the first sheet; sheets follow in order */
  readonly firstSheet: number
  readonly sheets: number
  /** the node of a floating face */
  readonly face?: number
  /** number of fixed nodes = index of the first lead's node */
  readonly count: number
}

/** Nodes at equal distances of at most `spacing` along every tube, then bars, sheets and a floating face. */
export function fixedNodes(
  bodies: readonly FixedBody[],
  floatingFace: boolean,
  spacing = nodeSpacing,
  sheets = 0,
): FixedNodes {
  const tubes: ColumnNodes[] = []
  let next = 0
  for (const body of bodies) {
    if (body.kind !== 'tube') continue
    const pieces = Math.max(1, Math.ceil(body.line.length / spacing - 1e-9))
    const { length } = body.line
    // the last one exactly: who asks for the whole length asks for the electrode
    const at = Float64Array.from({ length: pieces + 1 }, (_, k) =>
      k === pieces ? length : (length * k) / pieces,
    )
    tubes.push({ first: next, at })
    next += pieces + 1
  }
  const bars = bodies.filter((body) => body.kind === 'bar').length
  const firstBar = next
  const firstSheet = firstBar + bars
  next = firstSheet + sheets
  const metal = { firstBar, bars, firstSheet, sheets }
  return floatingFace ? { tubes, ...metal, face: next, count: next + 1 } : { tubes, ...metal, count: next }
}

/** The node of the lead with this index in the wiring. */
export const leadNode = (nodes: FixedNodes, lead: number): number => nodes.count + lead
