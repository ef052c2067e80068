/** Where two bodies pass each other: the raw material of pair findings. Metres. */

/** A body of the sign by its place in a list, a sheet (plate or wall) by its place among the sheets, or the face. */
export type BodyRef =
  | { readonly kind: 'fixed'; readonly index: number }
  | { readonly kind: 'lead'; readonly index: number }
  | { readonly kind: 'sheet'; readonly index: number }
  | { readonly kind: 'face' }

/**
 * One stretch over which two bodies stay close: sample places that could be its worst (local minima of the gap,
 * ends of the stretch, and places between). A pair of bodies has several runs where it passes itself in several
 * really separate places.
 */
export interface CloseRun {
  readonly a: BodyRef
  readonly b: BodyRef
  /** path length along a and along b of each sample (for sheets and the face: 0) */
  readonly atA: Float64Array
  readonly atB: Float64Array
  /** clear distance between outer surfaces, never below 0 */
  readonly gap: Float64Array
  /** x, y, z on the centre-line of a, and of b (for sheets and the face: the nearest place), of each sample */
  readonly pointA: Float64Array
  readonly pointB: Float64Array
}
