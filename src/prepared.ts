/** What the wiring of a sign does not move, made once per file, with a memo of the leads that were used. */
import type { StartMode } from './gaps/air.js'
import { fixedBodies } from './geometry/bodies.js'
import { fixedRuns, leadLeadRuns, leadRuns, withLeadIndex } from './geometry/close-runs.js'
import type { FixedBody, LeadBody, SheetBody, TubeBody } from './geometry/conductors.js'
import { leadBody } from './geometry/leads.js'
import { type FixedNodes, fixedNodes, nodeSpacing } from './geometry/nodes.js'
import type { CloseRun } from './geometry/runs.js'
import { fixedSheetRuns, leadSheetRuns } from './geometry/sheet-runs.js'
import { sheetBodies } from './geometry/sheets.js'
import { partOf } from './layout/ends.js'
import type { EndName, Layout } from './layout/layout.js'
import { type ResolvedRules, resolveRules } from './rules/resolve.js'

/** A lead in its place with where it passes glass and metal. Depends on its two ends only: kept between edits. */
export interface PlacedLead {
  readonly body: LeadBody
  /** the same for a lead told the other way round: its charges are kept by this */
  readonly conductor: object
  readonly runs: readonly CloseRun[]
}

export interface Prepared {
  readonly layout: Layout
  readonly bodies: readonly FixedBody[]
  readonly tubes: readonly TubeBody[]
  /** plates and upright walls */
  readonly sheets: readonly SheetBody[]
  readonly nodes: FixedNodes
  readonly runs: readonly CloseRun[]
  /** memo of leads and of where pairs of leads pass each other, by name */
  readonly leads: Map<string, PlacedLead>
  readonly crossings: Map<string, readonly CloseRun[]>
  /** what the sign is judged by */
  readonly rules: ResolvedRules
  readonly air: StartMode
}

/** `rules`: what `layout.rules` names, with the files beside it; without it the shipped sets of those names. */
export function prepare(
  layout: Layout,
  rules: ResolvedRules = resolveRules(layout.rules),
  air: StartMode = 'cautious',
): Prepared {
  const bodies = fixedBodies(layout)
  const sheets = sheetBodies(layout)
  return {
    layout,
    bodies,
    tubes: bodies.filter((body) => body.kind === 'tube'),
    sheets,
    nodes: fixedNodes(bodies, layout.face.metal === 'floating', nodeSpacing, sheets.length),
    runs: [...fixedRuns(bodies, layout), ...fixedSheetRuns(bodies, sheets)],
    leads: new Map(),
    crossings: new Map(),
    rules,
    air,
  }
}

/** The same for an edited layout: what did not move is kept. */
export function preparedAgain(prepared: Prepared, layout: Layout): Prepared {
  const was = prepared.layout
  if (layout === was) return prepared
  const sameGlass = layout.tubes === was.tubes && layout.metal === was.metal && layout.face === was.face
  if (!sameGlass) return prepare(layout, prepared.rules, prepared.air)
  const moved = movedLeads(was, layout)
  if (!moved) return { ...prepared, layout }
  const leads = new Map([...prepared.leads].filter(([, { body }]) => !moved(body.between)))
  return { ...prepared, layout, leads, crossings: new Map() }
}

/** Which leads run otherwise in another layout of the same glass: by their routes, or by their supply's place. */
function movedLeads(
  was: Layout,
  now: Layout,
): ((between: readonly [EndName, EndName]) => boolean) | undefined {
  const had = new Set(was.routes)
  const has = new Set(now.routes)
  // a route serves both terminals of its supply
  const supplies = new Set(now.supplies.map(({ id }) => id))
  const named = (end: EndName) => (supplies.has(partOf(end)) ? partOf(end) : end)
  const joint = (between: readonly [EndName, EndName]) => between.map(named).sort().join(' ')
  const rerouted = new Set(
    [...was.routes.filter((r) => !has.has(r)), ...now.routes.filter((r) => !had.has(r))].map((r) =>
      joint(r.between),
    ),
  )
  const terminals = now.supplies.flatMap((s, i) =>
    s.terminals === was.supplies[i]?.terminals ? [] : [`${s.id}.1`, `${s.id}.2`],
  )
  if (rerouted.size === 0 && terminals.length === 0) return undefined
  return (between) => rerouted.has(joint(between)) || between.some((end) => terminals.includes(end))
}

/** leads and crossings kept beyond what a wiring uses; each lead holds about half a megabyte of charges */
const mostLeads = 200
const mostCrossings = 20_000

/** A lead by its two ends, from the memo. */
export function placedLead(
  { layout, bodies, sheets, tubes, leads }: Prepared,
  between: readonly [EndName, EndName],
): PlacedLead {
  const name = between.join(' ')
  const known = leads.get(name)
  const placed = known ?? newLead()
  // the ones used last stand at the end: the first is the one to forget
  leads.delete(name)
  leads.set(name, placed)
  const [oldest] = leads.keys()
  if (leads.size > mostLeads + 3 * tubes.length && oldest !== undefined) leads.delete(oldest)
  return placed

  function newLead(): PlacedLead {
    const body = leadBody(layout, between)
    // a lead is at one potential: with itself it makes no pair
    const own = leadRuns(body, bodies, layout).filter((run) => run.b.kind !== 'lead')
    const runs = [...own, ...leadSheetRuns(body, sheets)]
    return { body, runs, conductor: leads.get([...between].reverse().join(' '))?.conductor ?? body }
  }
}

/** Where the leads of a wiring pass glass, metal and each other. */
export function runsOfLeads(prepared: Prepared, placed: readonly PlacedLead[]): CloseRun[] {
  const runs = placed.flatMap(({ runs: own }, i) => withLeadIndex(own, i))
  if (prepared.crossings.size > mostCrossings + placed.length ** 2) prepared.crossings.clear()
  for (const [i, a] of placed.entries())
    for (const [j, b] of placed.entries()) {
      if (j <= i) continue
      const name = `${a.body.name}|${b.body.name}`
      const known = prepared.crossings.get(name) ?? leadLeadRuns(a.body, b.body)
      prepared.crossings.set(name, known)
      runs.push(...withLeadIndex(known, i, j))
    }
  return runs
}
