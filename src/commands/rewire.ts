/** `tubewright rewire`: looks for better wiring, prints the proposals, writes one of them on demand. */
import { existsSync, realpathSync } from 'node:fs'
import { type LayoutFile, readLayoutFile, rulesBeside, saveSign } from '../files.js'
import { prepare, solver } from '../inspection.js'
import type { EndName, Layout, Wiring } from '../layout/layout.js'
import { printable } from '../layout/printable.js'
import { rewireJson } from '../report/rewire-json.js'
import { rewireText } from '../report/rewire-text.js'
import { type Proposal, type Rewired, type RewireProgress, rewire } from '../rewire/rewire.js'
import type { Joint } from '../rewire/steps.js'
import { wiringChange } from '../wiring/edits.js'
import { argumentsOf, complain, status, UsageFault } from './common.js'

interface Options {
  readonly json: boolean
  readonly keep: readonly string[]
  readonly seed: number
  /** s; without it the amount of work is fixed */
  readonly time: number | undefined
  /** number of the proposal to write, and where */
  readonly take: number | undefined
  readonly out: string | undefined
}

export function rewireCommand(args: readonly string[]): number {
  const { values, positionals } = argumentsOf({
    args: [...args],
    allowPositionals: true,
    options: {
      json: { type: 'boolean' },
      keep: { type: 'string', multiple: true },
      seed: { type: 'string' },
      time: { type: 'string' },
      take: { type: 'string' },
      out: { type: 'string' },
    },
  })
  const [path, ...more] = positionals
  if (path === undefined) throw new UsageFault('rewire needs a layout file')
  // --keep takes one joint after the other: those behind the first come as words of their own
  if (more.length > 0 && values.keep === undefined)
    throw new UsageFault(`rewire takes one layout; ${positionals.length} were named`)
  const options: Options = {
    json: values.json ?? false,
    keep: [...(values.keep ?? []), ...more],
    seed: whole('--seed', values.seed ?? '1', 0),
    time: values.time === undefined ? undefined : seconds(values.time),
    take: values.take === undefined ? undefined : whole('--take', values.take, 1),
    out: values.out,
  }
  if ((options.take === undefined) !== (options.out === undefined))
    throw new UsageFault('--take K and --out FILE go together: the proposal, and the file to write it into')
  const read = readLayoutFile(path)
  if (!read.ok) {
    complain(read.complaint)
    return status.unusable
  }
  return rewireFile(read.file, options)
}

function rewireFile(file: LayoutFile, options: Options): number {
  const { layout, path } = file
  const keep = options.keep.map((text) => jointOf(layout.wiring, text))
  const rules = rulesBeside(path, layout.rules)
  for (const { complaint } of rules.missing) complain(complaint)
  const prepared = prepare(layout, rules)
  const until = options.time === undefined ? Infinity : performance.now() + 1000 * options.time
  const rewired = watched(
    rewire(prepared, solver(prepared), {
      keep,
      seed: options.seed,
      endless: options.time !== undefined,
      stopped: () => performance.now() > until,
    }),
  )
  const name = printable(path)
  process.stdout.write(
    options.json
      ? `${JSON.stringify(rewireJson(name, layout, rewired))}\n`
      : rewireText(name, layout, rewired),
  )
  if (options.take === undefined || options.out === undefined)
    return statusOf(rewired.proposals[0], rules.missing.length > 0)
  const taken = rewired.proposals[options.take - 1]
  if (!taken) {
    const count = rewired.proposals.length
    throw new UsageFault(
      `--take ${options.take}: there ${count === 1 ? 'is 1 proposal' : `are ${count} proposals`}`,
    )
  }
  return written(file, layout, taken, options.out)
    ? statusOf(taken, rules.missing.length > 0)
    : status.unusable
}

/** Something to fix that is left by the best proposal, or by the one that is taken. */
const statusOf = (best: Proposal | undefined, missing: boolean): number =>
  best === undefined || missing || best.score.fix + best.score.unfit > 0 ? status.somethingToFix : status.fine

/** The layout with this wiring, under its own name or another one that is not there yet. */
function written({ path, source }: LayoutFile, layout: Layout, { wiring }: Proposal, out: string): boolean {
  const there = existsSync(out)
  const same = there && realpathSync(out) === realpathSync(path)
  if (there && !same) {
    complain(`${printable(out)}: there is a file of this name already; nothing was written`)
    return false
  }
  const saved = saveSign(out, source, { layout, wiring: layout.wiring }, { layout, wiring }, !same)
  complain(saved.ok ? `Written: ${printable(out)}` : `${printable(out)}: ${saved.why}`)
  return saved.ok
}

/** Runs the search to its end; on a terminal it tells how far it is once that takes more than a second. */
function watched(search: Generator<RewireProgress, Rewired>): Rewired {
  const start = performance.now()
  let told = start + 900
  for (let step = search.next(); ; step = search.next()) {
    if (step.done === true) {
      if (process.stderr.isTTY && told > start + 900) process.stderr.write('\r\x1b[K')
      return step.value
    }
    const now = performance.now()
    if (!process.stderr.isTTY || now < told + 100) continue
    told = now
    process.stderr.write(`\r\x1b[K${progressText(step.value)}`)
  }
}

const stages = { search: 'searching', proof: 'proving', confirm: 'solving in full' } as const
function progressText({ stage, judged, share, best }: RewireProgress): string {
  const part = share === undefined ? '' : ` ${Math.floor(100 * share)} %`
  const so = best === undefined ? '' : `, best so far ${best.fix} to fix, worst ${best.severity.toFixed(2)}`
  return `${stages[stage]}${part}, ${judged} wirings${so}`
}

/** `A.b–C.a`, also with a plain hyphen, which ids may have as well: every hyphen is tried. */
function jointOf(wiring: Wiring, text: string): Joint {
  const joints = wiringChange({ circuits: [] }, wiring).on
  const ends = new Set<EndName>(joints.flat())
  const pairs = [...text.matchAll(/[-–—]/g)].map(
    ({ index }): Joint => [text.slice(0, index).trim(), text.slice(index + 1).trim()],
  )
  const named = pairs.find((pair) => pair.every((end) => ends.has(end)))
  if (!named)
    throw new UsageFault(
      `--keep "${printable(text)}" does not name two ends of this layout; expected as ${joints[1]?.join('–') ?? 'A.b–C.a'}`,
    )
  const [a, b] = named
  if (!joints.some((joint) => joint.includes(a) && joint.includes(b)))
    throw new UsageFault(`--keep: the wiring does not join ${a} and ${b}, so there is nothing to keep`)
  return named
}

function whole(option: string, text: string, least: number): number {
  const number = /^\d{1,9}$/.test(text) ? Number(text) : -1
  if (number < least)
    throw new UsageFault(`${option} "${printable(text)}" is not a whole number from ${least} on`)
  return number
}

function seconds(text: string): number {
  const number = /^\d{1,5}(\.\d+)?$/.test(text) ? Number(text) : 0
  if (number <= 0) throw new UsageFault(`--time "${printable(text)}" is not a number of seconds above 0`)
  return number
}
