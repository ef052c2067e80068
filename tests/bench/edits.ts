/** Wirings to solve: edits round the sign, as somebody at the bench might try them one after the other. */
import type { EndName, Layout, Wiring } from '../../src/layout/layout.js'
import type { Edit } from '../../src/wiring/edit.js'
import { joinEnds, moveFeed, shiftTube, turnTube } from '../../src/wiring/edits.js'
import { circuitLeads } from '../../src/wiring/leads.js'
import { seeded } from './timing.js'

export interface NamedWiring {
  readonly name: string
  readonly wiring: Wiring
  /** leads between ends that were never joined before */
  readonly newLeads: number
}

/** after so many edits on top of each other the file's wiring is taken up again */
const depth = 4
const tries = 4000

type Pick = <T>(from: readonly T[]) => T

const kinds: readonly ((wiring: Wiring, pick: Pick) => [string, Edit<Wiring>])[] = [
  (wiring, pick) => {
    const { tube } = pick(pick(wiring.circuits).string)
    return [`turn ${tube}`, turnTube(wiring, tube)]
  },
  (wiring, pick) => {
    const circuit = pick([...wiring.circuits.keys()])
    const link = pick([...wiring.circuits[circuit]!.string.keys()])
    return [`feed ${circuit + 1} at link ${link}`, moveFeed(wiring, circuit, link)]
  },
  (wiring, pick) => {
    const { string } = pick(wiring.circuits)
    const ends = string.flatMap(({ tube }): EndName[] => [`${tube}.a`, `${tube}.b`])
    const [one, other] = [pick(ends), pick(ends)]
    return [`join ${one} ${other}`, joinEnds(wiring, one, other)]
  },
  (wiring, pick) => {
    const { tube } = pick(pick(wiring.circuits).string)
    const by = pick([-1, 1] as const)
    return [`shift ${tube} ${by}`, shiftTube(wiring, tube, by)]
  },
]

const leadNames = (wiring: Wiring): string[] =>
  circuitLeads(wiring).map(({ between }) => [...between].sort().join(' '))

/** Up to `count` edits of all four kinds in turn, each with a lead between ends that none before has joined. */
export function* editsWithNewLeads(layout: Layout, count: number): Generator<NamedWiring> {
  const random = seeded(12)
  const pick: Pick = (from) => from[Math.floor(random() * from.length)]!
  const seen = new Set(leadNames(layout.wiring))
  let now = layout.wiring
  let found = 0
  for (let k = 0; k < tries && found < count; k++) {
    const [name, edit] = kinds[k % kinds.length]!(now, pick)
    if (!edit.ok) continue
    const fresh = leadNames(edit.value).filter((lead) => !seen.has(lead))
    if (fresh.length === 0) continue
    for (const lead of fresh) seen.add(lead)
    found++
    now = found % depth === 0 ? layout.wiring : edit.value
    yield { name, wiring: edit.value, newLeads: fresh.length }
  }
}
