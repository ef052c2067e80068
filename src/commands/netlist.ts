/** `tubewright netlist`: the lit solution as a SPICE deck on stdout. */
import { type LayoutFile, readLayoutFile } from '../files.js'
import { networkSolver, type Prepared, prepare, type SolvedNetwork } from '../inspection.js'
import type { Layout } from '../layout/layout.js'
import { nodeNames } from '../netlist/node-names.js'
import { spiceDeck } from '../netlist/spice-deck.js'
import type { CircuitOutcome } from '../network/solution.js'
import { circuitLeads } from '../wiring/leads.js'
import { argumentsOf, complain, status, UsageFault } from './common.js'

export function netlistCommand(args: readonly string[]): number {
  const { values, positionals } = argumentsOf({
    args: [...args],
    allowPositionals: true,
    options: { supply: { type: 'string' } },
  })
  const [path, ...more] = positionals
  if (path === undefined) throw new UsageFault('netlist needs a layout file')
  if (more.length > 0) throw new UsageFault(`netlist takes one layout; ${positionals.length} were named`)
  const read = readLayoutFile(path)
  if (!read.ok) {
    complain(read.complaint)
    return status.unusable
  }
  return writeDeck(read.file, values.supply)
}

/** The deck of one supply on stdout, what is wrong with the sign on stderr. */
function writeDeck({ name, layout }: LayoutFile, asked: string | undefined): number {
  const source = sourceOf(layout, asked)
  const prepared = prepare(layout)
  const solved = networkSolver(prepared)(layout.wiring)
  const dark = solved.nominal.circuits.filter((c) => !c.lit)
  for (const circuit of dark) complain(darkText(layout, circuit))
  const deck = deckOf(name, prepared, solved, source)
  if (deck === undefined)
    complain(`${layout.wiring.circuits[source]!.supply}: no lit solution, so there is no deck to write.`)
  else process.stdout.write(deck)
  return dark.length > 0 ? status.somethingToFix : status.fine
}

function sourceOf({ wiring }: Layout, asked: string | undefined): number {
  const supplies = wiring.circuits.map((c) => c.supply)
  const source = asked === undefined ? 0 : supplies.indexOf(asked)
  if (source < 0)
    throw new UsageFault(`no circuit has the supply "${asked}"; expected ${supplies.join(' or ')}`)
  return source
}

/** The deck of the layout's own wiring, fed by the supply of this circuit; undefined where that is not lit. */
export function deckOf(
  file: string,
  { layout, nodes }: Prepared,
  { net, nominal, strained }: SolvedNetwork,
  source: number,
): string | undefined {
  const tubes = layout.tubes.map(({ id }) => id)
  const ids = (sheets: boolean) => layout.metal.flatMap((m) => ((m.kind !== 'bar') === sheets ? [m.id] : []))
  const metal = [...ids(false), ...ids(true)]
  const notes =
    strained.length > 0
      ? [`Drawn into other parts, so capacitances there are rough: ${strained.join(', ')}.`]
      : []
  const leads = circuitLeads(layout.wiring).map(({ between }) => between)
  const names = nodeNames(nodes, { tubes, metal, leads })
  return spiceDeck({ title: layout.title, file, network: net, state: nominal, source, names, tubes, notes })
}

function darkText({ tubes }: Layout, { supply, ...circuit }: CircuitOutcome): string {
  const dark = 'dark' in circuit ? circuit.dark.map((t) => tubes[t]!.id) : []
  return `${supply}: not lit${dark.length > 0 ? `, dark: ${dark.join(', ')}` : ''}.`
}
