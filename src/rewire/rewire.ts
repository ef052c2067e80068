/**
 * Looks for the wiring that puts a sign right. A cheap judge (judge.ts) ranks wirings, the full solution confirms the
 * best of them; only what was confirmed and is lit comes out as a proposal.
 *
 * Up to `provable` tubes in each circuit the ranking is exact: every wiring is scored where there are few, else branch
 * and bound leaves out only what cannot be among the best. Beyond, descents search, and a proof is tried for a while.
 * Exact is meant of the ranking, whose drops are those of the file's wiring: tests hold it against full solutions.
 */
import { type Inspection, inspection, type Prepared, type Solved } from '../inspection.js'
import type { EndName, Layout, Wiring } from '../layout/layout.js'
import { wiringChange } from '../wiring/edits.js'
import { branches, wiringCount } from './branches.js'
import { descents } from './descent.js'
import { cheapJudge, type Judge } from './judge.js'
import { codesOf, type Model, searchModel, wiringOf } from './model.js'
import { type Candidate, candidatePool, type Pool } from './pool.js'
import { compared, compareScores, dominates, type Score } from './score.js'
import { type Joint, type RewireStep, rewireSteps } from './steps.js'

/** tubes in a circuit up to which the ranking is proven, whatever it takes */
export const provable = 8
/** up to which a proof is tried: for a while, or for all the time that is set */
const worthProving = 12
/** up to this many wirings each is scored, without bounds: then alternatives are known as well as the best */
const enumerable = 50_000
/** wirings judged by descents in front of a proof that is sure to end, and of one that may not */
const warmUp = 3_000
const usualEffort = 40_000
/** beginnings after which a proof is given up; an everyday one takes some ten thousand for eight tubes */
const mostNodes = 20_000_000
const usualNodes = 500_000
const mostProposals = 5

export interface RewireOptions {
  readonly keep?: readonly Joint[]
  readonly seed?: number
  /** goes on searching until it is stopped; without it the amount of work is fixed, so a seed has one answer */
  readonly endless?: boolean
  /** asked all the time; what was found until then is confirmed */
  readonly stopped?: () => boolean
}

export interface RewireProgress {
  readonly stage: 'search' | 'proof' | 'confirm'
  readonly judged: number
  /** 0 … 1, where the work of the stage is known */
  readonly share?: number
  /** by the cheap judge */
  readonly best?: { readonly fix: number; readonly severity: number }
}

export interface Proposal {
  readonly wiring: Wiring
  readonly score: Score
  readonly inspection: Inspection
  readonly steps: readonly RewireStep[]
}

export interface Rewired {
  readonly exact: boolean
  readonly method: 'enumeration' | 'branch-and-bound' | 'search'
  /** complete wirings that were scored */
  readonly judged: number
  /** wirings that there are */
  readonly wirings: number
  readonly stopped: boolean
  /** the file's wiring, judged in full; it may be dark */
  readonly before: Proposal
  /** best first; the file's wiring alone where nothing is better, none where nothing is lit */
  readonly proposals: readonly Proposal[]
}

export function* rewire(
  prepared: Prepared,
  solve: (wiring: Wiring) => Solved,
  options: RewireOptions = {},
): Generator<RewireProgress, Rewired> {
  const { layout } = prepared
  const base = layout.wiring
  const solved = solve(base)
  const found = inspection(prepared, base, solved)
  const before = proposal(layout, base, found)
  const model = searchModel(prepared, solved, found, { keep: options.keep ?? [] })
  const pool = candidatePool()
  const search = yield* ranked(model, pool, codesOf(base, model.tubeIds), options)
  const proposals = yield* confirmed(prepared, solve, pool, model, before, search.judged)
  return { ...search, wirings: wiringCount(model), before, proposals }
}

/** Fills the pool. */
function* ranked(
  model: Model,
  pool: Pool,
  start: readonly (readonly number[])[],
  { seed = 1, endless = false, stopped = () => false }: RewireOptions,
): Generator<RewireProgress, Pick<Rewired, 'exact' | 'method' | 'judged' | 'stopped'>> {
  const judge = cheapJudge(model)
  const largest = Math.max(...model.circuits.map((tubes) => tubes.length))
  if (wiringCount(model) <= enumerable) return yield* proven(model, judge, pool, 0, Infinity, stopped)
  const forTime = endless && largest > worthProving
  const most = forTime ? Infinity : largest <= provable ? warmUp : usualEffort
  const going = descents(judge, pool, start, { seed, most })
  let judged = 0
  for (let step = going.next(); ; step = going.next()) {
    const { best } = step.value
    judged = step.value.judged
    if (step.done === true) break
    if (stopped()) return { exact: false, method: 'search', judged, stopped: true }
    yield {
      stage: 'search',
      judged,
      ...(!forTime && { share: Math.min(1, judged / most) }),
      ...(best && { best: { fix: best.fix, severity: best.severities[0] ?? 0 } }),
    }
  }
  if (largest > worthProving) return { exact: false, method: 'search', judged, stopped: false }
  const nodes = largest <= provable ? mostNodes : endless ? Infinity : usualNodes
  return yield* proven(model, judge, pool, judged, nodes, stopped)
}

/** Every wiring where there are few, branch and bound where descents have judged some `before`. */
function* proven(
  model: Model,
  judge: Judge,
  pool: Pool,
  before: number,
  mostNodes: number,
  stopped: () => boolean,
): Generator<RewireProgress, Pick<Rewired, 'exact' | 'method' | 'judged' | 'stopped'>> {
  const bound = before > 0
  const going = branches(model, judge, pool, { bound, mostNodes })
  for (let step = going.next(); ; step = going.next()) {
    const judged = before + step.value.judged
    if (step.done === true) {
      const exact = step.value.complete
      const method = !exact ? 'search' : bound ? 'branch-and-bound' : 'enumeration'
      return { exact, method, judged, stopped: false }
    }
    if (stopped()) return { exact: false, method: 'search', judged, stopped: true }
    yield { stage: 'proof', judged, share: step.value.share }
  }
}

/** The full solution of the candidates: what is lit and not beaten in everything by another. */
function* confirmed(
  prepared: Prepared,
  solve: (wiring: Wiring) => Solved,
  pool: Pool,
  model: Model,
  before: Proposal,
  judged: number,
): Generator<RewireProgress, Proposal[]> {
  const { layout } = prepared
  const candidates = pool.candidates()
  const held: Proposal[] = []
  for (const [i, candidate] of candidates.entries()) {
    yield { stage: 'confirm', judged, share: i / candidates.length }
    const wiring = wiringOf(layout.wiring, model.tubeIds, stringsOf(model, candidate))
    if (wiringChange(layout.wiring, wiring).on.length === 0) continue
    const solved = solve(wiring)
    if (!solved.outcomes.every(({ lit }) => lit)) continue
    held.push(proposal(layout, wiring, inspection(prepared, wiring, solved)))
  }
  return chosen(isLit(before.inspection) ? [before, ...held] : held, before)
}

/** Best first, each really another way: not beaten in everything by one before it; the file's wiring ends the list. */
function chosen(held: readonly Proposal[], before: Proposal): Proposal[] {
  const sorted = [...held].sort((a, b) => compareScores(a.score, b.score))
  const better = sorted.includes(before) ? sorted.slice(0, Math.max(1, sorted.indexOf(before))) : sorted
  const kept: Proposal[] = []
  for (const one of better) {
    const beaten = kept.some((other) => dominates(other.score, one.score) || sameJumpers(other, one))
    // behind the best, what only saves work is of no help to a sign that strains as before
    if (!beaten && (kept.length === 0 || strainsLess(one, before))) kept.push(one)
  }
  return kept.slice(0, mostProposals)
}

const strainsLess = (one: Proposal, before: Proposal): boolean =>
  !isLit(before.inspection) ||
  compareScores({ ...one.score, changed: 0, lead: 0 }, { ...before.score, changed: 0, lead: 0 }) < 0

/** Do two wirings join the same tubes? Then they differ in nothing but terminals 1 and 2. */
const sameJumpers = (a: Proposal, b: Proposal): boolean => {
  const { off, on } = wiringChange(a.wiring, b.wiring)
  return jumpersOf(a.wiring, [...off, ...on]) === 0
}

const isLit = ({ circuits }: Inspection): boolean => circuits.every(({ lit }) => lit)

function stringsOf({ circuits }: Model, { codes }: Candidate): number[][] {
  let from = 0
  return circuits.map((tubes) => {
    const string = codes.slice(from, from + tubes.length)
    from += tubes.length
    return string
  })
}

const proposal = (layout: Layout, wiring: Wiring, found: Inspection): Proposal => ({
  wiring,
  score: scoreOf(layout.wiring, wiring, found),
  inspection: found,
  steps: rewireSteps(layout.wiring, wiring),
})

/** The score of a wiring by its full findings. */
export function scoreOf(from: Wiring, wiring: Wiring, { pairs, circuits }: Inspection): Score {
  const { off, on } = wiringChange(from, wiring)
  return {
    unfit: circuits.filter(({ verdict }) => verdict === 'fix').length,
    fix: pairs.filter(({ verdict }) => verdict === 'fix').length,
    severities: pairs
      .map(({ severity }) => severity)
      .sort((a, b) => b - a)
      .slice(0, compared),
    changed: jumpersOf(wiring, [...off, ...on]),
    lead: circuits.reduce((sum, { leads }) => leads.reduce((m, { length }) => m + length, sum), 0),
  }
}

/** How many of these joints are between two tubes. */
const jumpersOf = ({ circuits }: Wiring, joints: readonly (readonly [EndName, EndName])[]): number => {
  const terminals = new Set(circuits.flatMap(({ supply }) => [`${supply}.1`, `${supply}.2`]))
  return joints.filter((joint) => !joint.some((end) => terminals.has(end))).length
}
