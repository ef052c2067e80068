/** Names of the network's nodes that a circuit simulator takes and a person can read. */
import type { FixedNodes } from '../geometry/nodes.js'
import type { EndName } from '../layout/layout.js'

export interface NamedParts {
  /** ids of the tubes, and of bars and then sheets, in the order of the nodes */
  readonly tubes: readonly string[]
  readonly metal: readonly string[]
  /** the two ends each lead joins, in the order of the nodes */
  readonly leads: readonly (readonly [EndName, EndName])[]
}

/**
 * One name for each node, in node order: `K_0`, `K_50` … `K_e` along a tube (mm from end a; `e` is end b),
 * `M_frame` for a bar, a plate or a wall, `face`, `L_S1_1_K_a` for the lead from S1.1 to K.a. Letters, digits and `_` only; no two are
 * the same in a program that does not tell capitals from small letters; none is `0`, the ground.
 */
export function nodeNames(nodes: FixedNodes, { tubes, metal, leads }: NamedParts): readonly string[] {
  const wanted = [
    ...nodes.tubes.flatMap(({ at }, t) =>
      Array.from(at, (place, k) => `${tubes[t]!}_${k === at.length - 1 ? 'e' : Math.round(place * 1000)}`),
    ),
    ...metal.map((id) => `M_${id}`),
    ...(nodes.face === undefined ? [] : ['face']),
    ...leads.map(([from, to]) => `L_${from}_${to}`),
  ]
  const taken = new Set<string>()
  return wanted.map((name) => {
    const plain = simple(name)
    let free = plain
    for (let n = 2; taken.has(free.toLowerCase()); n++) free = `${plain}_${n}`
    taken.add(free.toLowerCase())
    return free
  })
}

/** Letters without their accents, digits and `_`; a letter comes first, as a bare number could be taken for a value. */
function simple(name: string): string {
  const text = name
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .replace(/[^A-Za-z0-9]/g, '_')
  return /^[A-Za-z]/.test(text) ? text : `n${text}`
}
