/**
 * The cheap judge: takes a sign's tubes one after the other and says how bad what is placed so far is. Every figure of
 * the score only grows with further tubes, so what is placed is a bound for all that can follow.
 */
import type { Limit } from './limits.js'
import { severityAt } from './limits.js'
import type { Model, ModelLead } from './model.js'
import { compared, type Score } from './score.js'

/** At the tubes alone (and the lengths of leads), at what leads pass as well, and at where leads cross as well. */
export type Look = 'tubes' | 'leads' | 'all'

export interface Judge {
  /** back to nothing placed; what is not looked at leaves the score a bound */
  readonly restart: (look?: Look) => void
  /** places the next tube of the circuit at hand; false where a lead for it is forbidden. Undone by `takeBack`. */
  readonly place: (code: number) => boolean
  readonly takeBack: () => void
  /** of what is placed: changed by the next call */
  readonly score: () => Score
  /**
   * What every wiring that begins so has at least: the rest of the string lies at or below the potential that the
   * beginning ends with, so a tube still to come strains against one that is placed at least as much as it would here.
   */
  readonly bound: () => Score
}

/** What was true before a tube was placed. */
interface Mark {
  fix: number
  changed: number
  lead: number
  potential: number
  leads: number
  readonly severities: Float64Array
}

export function cheapJudge(model: Model): Judge {
  const { circuits, drop, top, tubeIds } = model
  const codes = 2 * tubeIds.length
  const count = circuits.reduce((sum, tubes) => sum + tubes.length, 0)
  // circuit and place in its string of each position of the whole sequence
  const circuitAt = circuits.flatMap((tubes, c) => tubes.map(() => c))
  const placeAt = circuits.flatMap((tubes) => tubes.map((_, k) => k))
  const placed = new Int32Array(count)
  const entered = new Float64Array(count)
  const leads: ModelLead[] = []
  const leadPotential = new Float64Array(count + circuits.length)
  const marks = Array.from(
    { length: count + 1 },
    (): Mark => ({
      fix: 0,
      changed: 0,
      lead: 0,
      potential: 0,
      leads: 0,
      severities: new Float64Array(compared),
    }),
  )
  const isPlaced = new Uint8Array(tubeIds.length)
  const ahead = new Float64Array(compared)
  const neighbours = neighbourTubes(model)
  let at = 0
  let now = marks[0]!
  let atLeads = true
  let atCrossings = true
  restart()
  return { restart, place, takeBack, score, bound }

  function restart(look: Look = 'all'): void {
    atLeads = look !== 'tubes'
    atCrossings = look === 'all'
    at = 0
    isPlaced.fill(0)
    now = marks[0]!
    now.severities.fill(0)
    now.fix = model.steadyFix
    for (const severity of model.steady) insert(now.severities, severity)
  }

  function insert(worst: Float64Array, severity: number): void {
    if (severity <= worst[compared - 1]!) return
    let k = compared - 1
    while (k > 0 && worst[k - 1]! < severity) {
      worst[k] = worst[k - 1]!
      k--
    }
    worst[k] = severity
  }

  function strain(limits: readonly Limit[] | undefined, va: number, vb: number): void {
    if (limits === undefined) return
    for (let i = 0; i < limits.length; i++) {
      const limit = limits[i]!
      const severity = severityAt(limit, va, vb)
      if (limit.broken || severity > 1) now.fix++
      insert(now.severities, severity)
    }
  }

  function addLead(from: number, to: number, potential: number): boolean {
    const lead = model.lead(from, to)
    if (lead.forbidden) return false
    now.lead += lead.length
    if (lead.changed) now.changed += 2
    if (atLeads) {
      const { alone, tubes } = lead.limits()
      strain(alone, potential, 0)
      for (let k = 0; k < at; k++) strain(tubes[placed[k]!], potential, entered[k]!)
    }
    if (atCrossings)
      for (let k = 0; k < now.leads; k++)
        strain(model.crossing(leads[k]!, lead), leadPotential[k]!, potential)
    leads[now.leads] = lead
    leadPotential[now.leads] = potential
    now.leads++
    return true
  }

  function place(code: number): boolean {
    const c = circuitAt[at]!
    const k = placeAt[at]!
    const before = now
    now = marks[at + 1]!
    now.severities.set(before.severities)
    now.fix = before.fix
    now.changed = before.changed
    now.lead = before.lead
    now.leads = before.leads
    const potential = k === 0 ? top[c]! : before.potential
    const terminal = codes + 2 * c
    const last = placed[at - 1]!
    // the lead in front of the tube joins the end that the loop leaves to the one that it enters
    const ok = addLead(k === 0 ? terminal : last ^ 1, code, potential)
    placed[at] = code
    isPlaced[code >> 1] = 1
    entered[at] = potential
    at++
    if (!ok) return false
    strain(model.metal[code], potential, 0)
    for (let j = 0; j < at - 1; j++) strain(model.pairs[code * codes + placed[j]!], potential, entered[j]!)
    if (atLeads)
      for (let j = 0; j < now.leads; j++) strain(leads[j]!.limits().tubes[code], leadPotential[j]!, potential)
    now.potential = potential - drop[code >> 1]!
    return k < circuits[c]!.length - 1 || addLead(code ^ 1, terminal + 1, now.potential)
  }

  function takeBack(): void {
    at--
    isPlaced[placed[at]! >> 1] = 0
    now = marks[at]!
  }

  function score(): Score {
    const { fix, severities, changed, lead } = now
    return { unfit: 0, fix, severities, changed, lead }
  }

  function bound(): Score {
    ahead.set(now.severities)
    let fix = now.fix
    const c = circuitAt[at - 1]
    if (c !== undefined && circuitAt[at] === c)
      for (let k = at - 1; k >= 0 && circuitAt[k] === c; k--) fix += aheadOf(placed[k]!, entered[k]!)
    return { unfit: 0, fix, severities: ahead, changed: now.changed, lead: now.lead }
  }

  /** Puts the least severities with tubes still to come into `ahead`; how many of them are to fix. */
  function aheadOf(code: number, potential: number): number {
    let fix = 0
    for (const u of neighbours[code >> 1]!) {
      if (isPlaced[u] === 1) continue
      const one = model.pairs[code * codes + 2 * u]!
      const other = model.pairs[code * codes + 2 * u + 1]!
      for (let i = 0; i < one.length; i++) {
        const severity = Math.min(
          severityAt(one[i]!, potential, now.potential),
          severityAt(other[i]!, potential, now.potential),
        )
        if (one[i]!.broken || severity > 1) fix++
        insert(ahead, severity)
      }
    }
    return fix
  }
}

/** Of each tube, the others of its circuit that it passes. */
function neighbourTubes({ circuits, pairs, tubeIds }: Model): number[][] {
  const codes = 2 * tubeIds.length
  const near: number[][] = tubeIds.map(() => [])
  for (const tubes of circuits)
    for (const t of tubes)
      near[t] = tubes.filter((u) => u !== t && pairs[2 * t * codes + 2 * u] !== undefined)
  return near
}
