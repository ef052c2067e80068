/** Reading a solution at any place of any body. V rms phasors; path lengths in m. */

import type { FixedNodes } from '../geometry/nodes.js'
import type { BodyRef } from '../geometry/runs.js'
import type { Wiring } from '../layout/layout.js'
import type { Complex } from '../math/complex.js'
import type { PotentialField } from './solution.js'

/**
 * Where potentials are read: the nodes, and for each tube the nodes of the leads at its electrodes
 * (electrodes[2 t] at end a, electrodes[2 t + 1] at end b; −1 where the wiring does not use the tube).
 */
export interface Probe {
  readonly nodes: FixedNodes
  readonly electrodes: Int32Array
  /** number of tubes among the fixed bodies; bars follow */
  readonly tubes: number
}

export function probe(wiring: Wiring, tubeIds: readonly string[], nodes: FixedNodes): Probe {
  const electrodes = new Int32Array(2 * tubeIds.length).fill(-1)
  let lead = nodes.count
  for (const { string } of wiring.circuits) {
    for (const { tube, reversed } of string) {
      const t = tubeIds.indexOf(tube)
      electrodes[2 * t + (reversed ? 1 : 0)] = lead
      electrodes[2 * t + (reversed ? 0 : 1)] = lead + 1
      lead++
    }
    lead++
  }
  return { nodes, electrodes, tubes: tubeIds.length }
}

/** A place in terms of nodes: V = (1 − t) V[low] + t V[high]; node −1 is ground. */
export interface NodeMix {
  readonly low: number
  readonly high: number
  readonly t: number
}
/** 0 V */
export const ground: NodeMix = { low: -1, high: -1, t: 0 }
const whole = (node: number): NodeMix => ({ low: node, high: node, t: 0 })

/** Which nodes give the potential at path length `at` of a body. The ends of a tube are its electrodes. */
export function nodeMix({ nodes, electrodes, tubes }: Probe, body: BodyRef, at: number): NodeMix {
  if (body.kind === 'lead') return whole(nodes.count + body.index)
  if (body.kind === 'sheet') return whole(nodes.firstSheet + body.index)
  if (body.kind === 'face') return nodes.face === undefined ? ground : whole(nodes.face)
  if (body.index >= tubes) return whole(nodes.firstBar + body.index - tubes)
  const { first, at: places } = nodes.tubes[body.index]!
  const pieces = places.length - 1
  const length = places[pieces]!
  const electrode = electrodes[2 * body.index + (at <= 0 ? 0 : 1)]!
  if ((at <= 0 || at >= length) && electrode >= 0) return whole(electrode)
  const scaled = (Math.min(Math.max(at, 0), length) / length) * pieces
  const k = Math.min(pieces - 1, Math.floor(scaled))
  return { low: first + k, high: first + k + 1, t: scaled - k }
}

/** The potential at a mix of nodes, V rms. */
export const potentialAt = (field: PotentialField, place: NodeMix): Complex => ({
  re: readRe(field, place),
  im: readIm(field, place),
})

// one by one where there are many places: nothing is allocated
function readRe(field: PotentialField, { low, high, t }: NodeMix): number {
  return low < 0 ? 0 : field.re[low]! * (1 - t) + field.re[high]! * t
}
function readIm(field: PotentialField, { low, high, t }: NodeMix): number {
  return low < 0 ? 0 : field.im[low]! * (1 - t) + field.im[high]! * t
}

/** rms difference between two places of fields that are incoherent with each other: √Σ|ΔV|², V. */
export function rmsDifference(fields: readonly PotentialField[], a: NodeMix, b: NodeMix): number {
  let sum = 0
  for (const field of fields) {
    const re = readRe(field, a) - readRe(field, b)
    const im = readIm(field, a) - readIm(field, b)
    sum += re * re + im * im
  }
  return Math.sqrt(sum)
}

/** Peak of the worst instant: √2 Σ|ΔV|, V. */
export function peakDifference(fields: readonly PotentialField[], a: NodeMix, b: NodeMix): number {
  let sum = 0
  for (const field of fields)
    sum += Math.hypot(readRe(field, a) - readRe(field, b), readIm(field, a) - readIm(field, b))
  return Math.SQRT2 * sum
}

/** rms potential to ground, V. */
export const rmsPotential = (fields: readonly PotentialField[], place: NodeMix): number =>
  rmsDifference(fields, place, ground)

/**
 * Potential at one instant of the cycle, V: √2 Re(V e^{jφ}) of every supply at the same phase φ (radians).
 * A snapshot field (frequency 0) holds rms values with a sign: its instant is scaled by cos φ the same way.
 */
export function instantPotential(fields: readonly PotentialField[], place: NodeMix, phase: number): number {
  let sum = 0
  for (const field of fields)
    sum += readRe(field, place) * Math.cos(phase) - readIm(field, place) * Math.sin(phase)
  return Math.SQRT2 * sum
}
