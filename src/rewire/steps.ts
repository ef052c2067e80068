/** The way from one wiring to another at the bench, in a safe order: facts; view/rewire-text.ts says them in words. */
import type { EndName, Wiring } from '../layout/layout.js'
import { wiringChange } from '../wiring/edits.js'

export type Joint = readonly [EndName, EndName]

export type RewireStep =
  | { readonly kind: 'leave' }
  | { readonly kind: 'power-off' }
  | { readonly kind: 'take-off' | 'put-on'; readonly what: 'jumper' | 'feed'; readonly joint: Joint }
  /** the tube ends that a supply's terminals 1 and 2 now go to */
  | { readonly kind: 'feed'; readonly supply: string; readonly ends: readonly [EndName, EndName] }
  | { readonly kind: 'check' }
  | { readonly kind: 'power-up' }

/** Nothing is put on before all is off; nothing is powered before it is looked at. */
export function rewireSteps(before: Wiring, after: Wiring): RewireStep[] {
  const terminals = new Set(after.circuits.flatMap(({ supply }) => [`${supply}.1`, `${supply}.2`]))
  const { off, on } = wiringChange(before, after)
  if (off.length + on.length === 0) return [{ kind: 'leave' }]
  const what = (joint: Joint) => (joint.some((end) => terminals.has(end)) ? 'feed' : 'jumper')
  const sorted = (joints: readonly Joint[]) => [
    ...joints.filter((joint) => what(joint) === 'feed'),
    ...joints.filter((joint) => what(joint) === 'jumper'),
  ]
  const fed = after.circuits.flatMap(({ supply }): RewireStep[] => {
    const ends = [1, 2].map((k) => otherEnd(wiringChange({ circuits: [] }, after).on, `${supply}.${k}`))
    const moves = on.some((joint) => joint.some((end) => end === `${supply}.1` || end === `${supply}.2`))
    return moves ? [{ kind: 'feed', supply, ends: [ends[0]!, ends[1]!] }] : []
  })
  return [
    { kind: 'power-off' },
    // the supply comes off first and goes on last
    ...sorted(off).map((joint): RewireStep => ({ kind: 'take-off', what: what(joint), joint })),
    ...sorted(on)
      .reverse()
      .map((joint): RewireStep => ({ kind: 'put-on', what: what(joint), joint })),
    ...fed,
    { kind: 'check' },
    { kind: 'power-up' },
  ]
}

function otherEnd(joints: readonly Joint[], end: EndName): EndName {
  const joint = joints.find((pair) => pair.includes(end))
  return joint === undefined ? end : joint[0] === end ? joint[1] : joint[0]
}
