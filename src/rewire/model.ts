/**
 * The sign as the search sees it: tubes with fixed drops, ends, and what the gaps between parts allow. Leads and where
 * they cross are looked at when a wiring first asks for them.
 *
 * Ends are numbered: 2t for end a of tube t, 2t + 1 for its end b, then the terminals of each circuit's supply. A
 * placed tube is coded 2t, or 2t + 1 when it is entered at b. Potentials: the lit drops of the file's wiring one after
 * the other from terminal 1 on, without phase and stray current; V rms.
 */
import { defaultReach, leadLeadRuns, leadRuns, withLeadIndex } from '../geometry/close-runs.js'
import type { LeadBody } from '../geometry/conductors.js'
import { leadBody } from '../geometry/leads.js'
import type { BodyRef } from '../geometry/runs.js'
import { leadSheetRuns } from '../geometry/sheet-runs.js'
import type { Inspection, Prepared, Solved } from '../inspection.js'
import type { EndName, Wiring } from '../layout/layout.js'
import { columnLaw } from '../network/columns.js'
import { nodeMix, rmsDifference } from '../network/potentials.js'
import { chosenRules } from '../rules/pair-rules.js'
import type { Parts } from '../rules/passing.js'
import { partBits } from '../rules/rule-set.js'
import { litUpper } from '../rules/voltages.js'
import { wiringChange } from '../wiring/edits.js'
import { fixedLimits } from './fixed-limits.js'
import { type CircuitFigures, type Limit, type LimitContext, limitOf, runLimit } from './limits.js'

export interface ModelLead {
  readonly index: number
  /** m, clear gap up to which it is looked at */
  readonly reach: number
  /** m */
  readonly length: number
  /** may not be used: longer than the supply's leads allow, or against a joint that must stay */
  readonly forbidden: boolean
  /** joins two tubes that the file's wiring does not join */
  readonly changed: boolean
  /** what it passes, looked at when it is first asked for */
  readonly limits: () => LeadLimits
  readonly body: LeadBody
}

export interface LeadLimits {
  /** with metal and with itself: by the lead's own potential */
  readonly alone: readonly Limit[]
  /** with each placed tube (by its code); a is the lead */
  readonly tubes: readonly (readonly Limit[] | undefined)[]
}

export interface Model {
  /** tubes of each circuit of the wiring, by index among the layout's tubes */
  readonly circuits: readonly (readonly number[])[]
  readonly tubeIds: readonly string[]
  /** V, of each tube, and of each circuit its potential at terminal 1 */
  readonly drop: Float64Array
  readonly top: Float64Array
  /** severities that no wiring changes: tubes with themselves; and how many of them are to fix */
  readonly steady: readonly number[]
  readonly steadyFix: number
  /** by the code of a placed tube: with metal; and with another placed tube (code · codes + code) */
  readonly metal: readonly (readonly Limit[])[]
  readonly pairs: readonly (readonly Limit[] | undefined)[]
  /** jumpers of the file's wiring, by their two ends */
  readonly jumpers: readonly (readonly [number, number])[]
  readonly lead: (from: number, to: number) => ModelLead
  /** m, the shortest lead that can end at a tube, of each tube; known to proofs only: it looks at every lead */
  readonly leastLeads: () => Float64Array
  readonly crossing: (one: ModelLead, other: ModelLead) => readonly Limit[]
}

export interface Keep {
  /** joints that must stay, each by its two ends */
  readonly keep: readonly (readonly [EndName, EndName])[]
}

/** where no rule speaks of a lead, only a discharge counts: wider gaps than this start none at these voltages, m (ours) */
const dischargeReach = 0.03

const none: readonly Limit[] = []

export function searchModel(prepared: Prepared, solved: Solved, found: Inspection, { keep }: Keep): Model {
  const { layout, tubes, rules } = prepared
  const wiring = found.wiring
  const { drop, electrode } = tubeDrops(prepared, solved, found)
  const indexOf = new Map(layout.tubes.map(({ id }, t) => [id, t]))
  const circuits = wiring.circuits.map(({ string }) => string.map(({ tube }) => indexOf.get(tube)!))
  const figures = found.context.supplies.map(
    (supply, c): CircuitFigures => ({ supply, needed: circuits[c]!.reduce((sum, t) => sum + drop[t]!, 0) }),
  )
  const most = figures.reduce((sum, { needed }) => sum + needed, 0)
  const chosen = chosenRules(rules.sets, layout.altitude)
  const contextOf = (
    leads: readonly LeadBody[],
    ends: readonly (readonly [number, number])[],
  ): LimitContext => ({
    parts: partsWith(
      found,
      leads,
      ends.map((pair) => circuitOfEnd(pair[0])),
      ends.map(isFeed),
    ),
    rules: chosen,
    altitude: layout.altitude,
    circuits: figures,
  })
  const names = endNames(
    layout.tubes.map(({ id }) => id),
    wiring,
  )
  const circuitOfEnd = (end: number): number =>
    end < 2 * tubes.length ? found.context.circuitOfTube[end >> 1]! : (end - 2 * tubes.length) >> 1
  const isFeed = ([from, to]: readonly [number, number]): boolean => Math.max(from, to) >= 2 * tubes.length

  /** potential along a placed tube at the samples of a run, against its entering end */
  const along = (code: number, places: Float64Array): Float64Array => {
    const t = code >> 1
    const length = tubes[t]!.line.length
    return places.map((at) => {
      const passed = shareAt(at / length, electrode[t]!)
      return -drop[t]! * (code % 2 === 0 ? passed : 1 - passed)
    })
  }
  const still = (places: Float64Array): Float64Array => new Float64Array(places.length)
  const fixed = fixedLimits(prepared, contextOf([], []), along, still, drop, most)

  const leads: (ModelLead | undefined)[] = new Array(names.length ** 2)
  const ends: (readonly [number, number])[] = []
  const crossings: (readonly Limit[])[][] = []
  const joined = joinedEnds(wiring, names)
  const kept = new Map(
    keep.flatMap(
      ([a, b]) =>
        [
          [a, b],
          [b, a],
        ] as const,
    ),
  )
  const longestLeads = figures.map(({ supply }) => supply.maxLead)

  const reachOf = (feed: boolean): number => {
    const bits = partBits.any | partBits.lead | partBits.bare | (feed ? partBits.feed : partBits.jumper)
    return chosen.some(({ rule }) => rule.sides.some((side) => (side & bits) !== 0))
      ? defaultReach
      : dischargeReach
  }

  const limitsOfLead = (body: LeadBody, from: number, to: number, reach: number): LeadLimits => {
    const context = contextOf([body], [[from, to]])
    const runs = withLeadIndex(
      [...leadRuns(body, prepared.bodies, layout, reach), ...leadSheetRuns(body, prepared.sheets, reach)],
      0,
    )
    const alone: Limit[] = []
    const withTubes: (Limit[] | undefined)[] = []
    for (const run of runs) {
      const limit = runLimit(context, run)
      const other = run.b.kind === 'lead' ? run.a : run.b
      if (other.kind !== 'fixed' || other.index >= tubes.length) {
        // with itself there is no difference
        const own = run.a.kind === 'lead' && run.b.kind === 'lead'
        const silent = own ? { ...limit, per: still(limit.per), steady: 0 } : limit
        alone.push(...limitOf(silent, still(run.atA), still(run.atB), most))
        continue
      }
      const places = run.a.kind === 'lead' ? run.atB : run.atA
      for (const code of [2 * other.index, 2 * other.index + 1]) {
        const there = limitOf(limit, still(places), along(code, places), most)
        if (there.length > 0) withTubes[code] = [...(withTubes[code] ?? []), ...there]
      }
    }
    return { alone, tubes: withTubes }
  }

  const newLead = (from: number, to: number): ModelLead => {
    const between = [names[from]!, names[to]!] as const
    const body = leadBody(layout, between)
    const feed = isFeed([from, to])
    const reach = reachOf(feed)
    const longest = longestLeads[circuitOfEnd(from)]
    const against = [between, [between[1], between[0]] as const].some(
      ([end, other]) => kept.has(end) && kept.get(end) !== other,
    )
    const index = ends.length
    let limits: LeadLimits | undefined
    ends.push([from, to])
    return {
      index,
      reach,
      length: body.line.length,
      forbidden:
        against ||
        (feed && longest !== undefined && body.line.length > longest + 1e-6) ||
        (feed && between.some((end) => returns.has(end))),
      changed: !feed && joined.get(from) !== to,
      limits: () => {
        limits ??= limitsOfLead(body, from, to, reach)
        return limits
      },
      body,
    }
  }
  const returns = new Set(wiring.circuits.flatMap((c) => c.midpointReturn ?? []))

  const lead = (from: number, to: number): ModelLead => {
    const key = Math.min(from, to) * names.length + Math.max(from, to)
    const known = leads[key]
    if (known) return known
    const made = newLead(Math.min(from, to), Math.max(from, to))
    leads[key] = made
    crossings.push([])
    return made
  }
  const leastLeads = (): Float64Array =>
    Float64Array.from(tubes, (_, t) => {
      const c = found.context.circuitOfTube[t]!
      const terminals = [2 * tubes.length + 2 * c, 2 * tubes.length + 2 * c + 1]
      const others = (circuits[c] ?? []).flatMap((u) => (u === t ? [] : [2 * u, 2 * u + 1]))
      const lengths = [...others, ...terminals].flatMap((end) =>
        [2 * t, 2 * t + 1].map((own) => lead(end, own)).flatMap((one) => (one.forbidden ? [] : [one.length])),
      )
      return lengths.length === 0 ? 0 : Math.min(...lengths)
    })

  return {
    circuits,
    tubeIds: layout.tubes.map(({ id }) => id),
    drop,
    top: Float64Array.from(figures, ({ supply, needed }) =>
      supply.grounding === 'one-end' ? needed : needed / 2,
    ),
    ...fixed,
    jumpers: [...joined].filter(([a, b]) => a < b && b < 2 * tubes.length),
    lead,
    leastLeads,
    crossing: (one, other) => {
      const [a, b] = one.index < other.index ? [one, other] : [other, one]
      const row = crossings[a.index]!
      const known = row[b.index]
      if (known) return known
      const context = contextOf([a.body, b.body], [ends[a.index]!, ends[b.index]!])
      const found = withLeadIndex(leadLeadRuns(a.body, b.body, Math.min(a.reach, b.reach)), 0, 1).flatMap(
        (run) => limitOf(runLimit(context, run), still(run.atA), still(run.atB), most),
      )
      row[b.index] = found.length === 0 ? none : found
      return row[b.index]!
    },
  }
}

/** Names of all ends by their number. */
export const endNames = (tubeIds: readonly string[], wiring: Wiring): EndName[] => [
  ...tubeIds.flatMap((id) => [`${id}.a`, `${id}.b`]),
  ...wiring.circuits.flatMap(({ supply }) => [`${supply}.1`, `${supply}.2`]),
]

function joinedEnds(wiring: Wiring, names: readonly EndName[]): Map<number, number> {
  const joined = new Map<number, number>()
  const nothing: Wiring = { circuits: [] }
  for (const pair of wiringChange(nothing, wiring).on) {
    const [a, b] = pair.map((end) => names.indexOf(end))
    joined.set(a!, b!)
    joined.set(b!, a!)
  }
  return joined
}

/** The drop of each tube at the upper end of the lit band (on paper where it is not lit), and its electrodes' share. */
function tubeDrops(
  { tubes }: Prepared,
  solved: Solved,
  { probe, nameplate, context }: Inspection,
): { drop: Float64Array; electrode: Float64Array } {
  const drop = Float64Array.from(tubes, ({ line }, index) => {
    const ref: BodyRef = { kind: 'fixed', index }
    const [a, b] = [nodeMix(probe, ref, 0), nodeMix(probe, ref, line.length)]
    const dark = context.unlit.has(context.circuitOfTube[index]!)
    return dark ? rmsDifference(nameplate, a, b) : litUpper(solved.lit, a, b)
  })
  const electrode = Float64Array.from(tubes, ({ outerRadius, fill, line }) => {
    const { electrodeDrop, gradient, ratedCurrent } = columnLaw(2 * outerRadius, fill)
    return electrodeDrop / (electrodeDrop + gradient(ratedCurrent) * line.length)
  })
  return { drop, electrode }
}

/** What share of a tube's drop lies between its end a and this share of its length. */
const shareAt = (along: number, electrode: number): number =>
  along <= 0 ? 0 : along >= 1 ? 1 : electrode / 2 + (1 - electrode) * along

/** The sign as the rules see it, with these leads alone. */
const partsWith = (
  { context }: Inspection,
  leads: readonly LeadBody[],
  circuitOfLead: readonly number[],
  feed: readonly boolean[],
): Parts => ({
  layout: context.layout,
  bodies: context.bodies,
  sheets: context.sheets,
  circuitOfTube: context.circuitOfTube,
  supplies: context.supplies,
  leads,
  circuitOfLead,
  feeds: new Set(feed.flatMap((is, i) => (is ? [i] : []))),
})

/** The wiring of coded strings, with all else as the circuits of `base` have it. */
export const wiringOf = (
  base: Wiring,
  tubeIds: readonly string[],
  strings: readonly ArrayLike<number>[],
): Wiring => ({
  circuits: base.circuits.map((circuit, c) => ({
    ...circuit,
    string: Array.from(strings[c]!, (code) => ({ tube: tubeIds[code >> 1]!, reversed: code % 2 === 1 })),
  })),
})

export const codesOf = (wiring: Wiring, tubeIds: readonly string[]): number[][] =>
  wiring.circuits.map(({ string }) =>
    string.map(({ tube, reversed }) => 2 * tubeIds.indexOf(tube) + (reversed ? 1 : 0)),
  )
