/**
 * The lit solution as a deck for SPICE: every column a resistor at its operating point, all capacitances, the
 * supplies as what they are at the frequency of the one that feeds. rms phasors, V, A, Ω, F, H.
 */
import { cleaned } from '../layout/printable.js'
import type { Network } from '../network/network.js'
import type { CircuitOutcome, LitState, PotentialField } from '../network/solution.js'
import { stringResistances } from '../network/stray.js'
import { attachment } from '../network/supplies.js'

export interface DeckContents {
  /** of the sign, and the name of its file; one line each is made of them */
  readonly title: string
  readonly file: string
  readonly network: Network
  readonly state: LitState
  /** index of the circuit whose supply is the source; it is lit */
  readonly source: number
  /** one for each node (node-names.ts) */
  readonly names: readonly string[]
  /** one for each tube, for the comments */
  readonly tubes: readonly string[]
  /** what the reader has to know of this sign besides: one comment each */
  readonly notes: readonly string[]
}

/** The deck, ready for `ngspice -b`; undefined where the source's circuit is not lit. */
export function spiceDeck(contents: DeckContents): string | undefined {
  const { network, state, source } = contents
  const outcome = state.circuits[source]
  const field = state.fields.find(({ supply }) => supply === outcome?.supply)
  if (!outcome?.lit || !field) return undefined
  const grounded = new Set(network.grounded)
  const names = contents.names.map((name, node) => (grounded.has(node) ? '0' : name))
  const f = figure(field.frequency)
  return [
    ...headLines(contents, field.frequency),
    '*',
    '* supplies',
    ...network.circuits.flatMap((_, c) => supplyLines(contents, outcome, names, c)),
    '*',
    ...columnLines(contents, names),
    '*',
    '* capacitances: of every two nodes, then of each node to ground and grounded metal',
    ...capacitorLines(network, names),
    '*',
    '* the solution this deck must repeat, at the leads: V rms and degrees',
    ...expectedLines(contents, field, names),
    // vm and vp of the leads, so that a batch run prints something
    `.print ac ${network.circuits.flatMap((_, c) => leadNodes(network, c).map((node) => `vm(${names[node]!})`)).join(' ')}`,
    `.ac lin 1 ${f} ${f}`,
    '.options noopac rshunt=1e15 pivtol=1e-18',
    '.end',
    '',
  ].join('\n')
}

const figure = (value: number): string => String(Number(value.toPrecision(15)))

const comment = (text: string): string => `* ${cleaned(text)}`

function headLines(
  { title, file, network, state, source, notes }: DeckContents,
  frequency: number,
): string[] {
  const { supply } = network.circuits[source]!
  const others = network.circuits.filter((_, c) => c !== source).map((c) => c.supply.id)
  const dark = state.circuits.filter((c) => !c.lit).map((c) => c.supply)
  return [
    `${title} (${file}), lit, fed by ${supply.id}: written by tubewright`,
    'Units: V and A rms, ohm, farad, henry; potentials against ground (node 0).',
    `Condition: lit, ${figure(frequency)} Hz, nominal column law (the real one is within 30 % or so).`,
    'This is a linearised operating point: each column is the resistor that its current makes of it. It repeats the',
    'potentials of this state alone; with another voltage, load or wiring the resistors would be others.',
    'Nodes: K_0, K_50 ... K_e are places in the gas of tube K, mm from its end a, K_e at its end b; L_x_y is the lead',
    'from x to y with the supply terminal and the electrodes it joins; M_x is ungrounded metal; grounded metal is 0.',
    'Capacitors between nodes of one tube may be negative (charge is shared out over its nodes); .ac takes them.',
    'rshunt gives every node a path to ground for direct current; 1e15 ohm change nothing. noopac: all is linear, so no .op.',
    ...(others.length > 0
      ? [
          `Supplies besides ${supply.id}: ${others.join(', ')}. Here they are shorts (electronic) or inductances (core and coil);`,
          'each has a deck of its own (--supply), and the rms values of the sign are root sums of squares over the decks.',
          'Resistors are made of the total rms currents, of all supplies.',
        ]
      : []),
    ...(dark.length > 0 ? [`Not lit: ${dark.join(', ')}. Its columns are open, its supply is off.`] : []),
    ...notes,
  ].map(comment)
}

/** Sources of the one that feeds; shorts and inductances of the others. */
function supplyLines(
  { network, source }: DeckContents,
  fed: Extract<CircuitOutcome, { lit: true }>,
  names: readonly string[],
  c: number,
): string[] {
  const { supply, from, to, midpointReturn } = network.circuits[c]!
  const { frequency } = network.circuits[source]!.supply
  const feeds = c === source
  const attached = attachment(supply, feeds, frequency)
  const [one, two] = [names[network.node[from]!]!, names[network.node[to]!]!]
  // behind a reactance the source has a node of its own; no name of a part ends like this
  const emf = (leg: string) => `emf_${c + 1}${leg === '1' ? 'a' : 'b'}`
  const coil = (leg: string, a: string, b: string, susceptance: number) =>
    `L${c + 1}_${leg} ${a} ${b} ${figure(-1 / (2 * Math.PI * frequency * susceptance))}`
  const lines = [
    comment(`${supply.id}: ${supply.type}, ${supply.grounding}${feeds ? '' : ', not the source'}`),
  ]
  if (attached.kind === 'held') {
    // an ideal source: what the supply holds at its terminals in this state
    const [v1, v2] = feeds ? fed.terminalVoltage : [zero, zero]
    lines.push(voltage(`V${c + 1}_1`, one, '0', v1), voltage(`V${c + 1}_2`, two, '0', v2))
  } else if (attached.kind === 'merged') {
    lines.push(voltage(`V${c + 1}`, one, two, { re: feeds ? fed.neededVoltage : 0, im: 0 }))
  } else if (attached.kind === 'legs') {
    const { volts, both, susceptance } = attached
    lines.push(voltage(`V${c + 1}_1`, emf('1'), '0', { re: volts[0], im: 0 }))
    lines.push(coil('1', emf('1'), one, susceptance))
    if (both) {
      lines.push(voltage(`V${c + 1}_2`, emf('2'), '0', { re: volts[1], im: 0 }))
      lines.push(coil('2', emf('2'), two, susceptance))
    } else lines.push(voltage(`V${c + 1}_2`, two, '0', zero))
  } else {
    lines.push(voltage(`V${c + 1}`, emf('1'), two, { re: attached.volts, im: 0 }))
    lines.push(coil('1', emf('1'), one, attached.susceptance))
  }
  if (midpointReturn !== undefined && supply.grounding === 'midpoint')
    lines.push(voltage(`V${c + 1}_return`, names[network.node[midpointReturn]!]!, '0', zero))
  return lines
}

const zero = { re: 0, im: 0 } as const

function voltage(name: string, plus: string, minus: string, { re, im }: { re: number; im: number }): string {
  const value =
    im === 0 ? figure(re) : `${figure(Math.hypot(re, im))} ${figure((Math.atan2(im, re) * 180) / Math.PI)}`
  return `${name} ${plus} ${minus} dc 0 ac ${value}`
}

/** Resistors tube after tube, as the string meets them. */
function columnLines({ network, state, tubes }: DeckContents, names: readonly string[]): string[] {
  let tube = -1
  return stringResistances(network, state).flatMap((r, k) => {
    const line = `R${k + 1} ${names[r.nodes[0]]!} ${names[r.nodes[1]]!} ${figure(r.ohms)}`
    if (r.tube === tube) return [line]
    tube = r.tube
    return [comment(`tube ${tubes[tube]!}: electrode, column, electrode, as the string runs`), line]
  })
}

/** Of the Maxwell matrix: −C_ij between nodes i and j, the row sum to ground. Nodes at ground fall together. */
function capacitorLines(
  { capacitance: { count, matrix }, toGround }: Network,
  names: readonly string[],
): string[] {
  const lines: string[] = []
  const put = (a: string, b: string, farad: number) => {
    if (farad !== 0) lines.push(`C${lines.length + 1} ${a} ${b} ${figure(farad)}`)
  }
  for (let i = 0; i < count; i++)
    for (let j = i + 1; j < count; j++)
      if (names[i] !== '0' && names[j] !== '0') put(names[i]!, names[j]!, -matrix[i * count + j]!)
  for (let i = 0; i < count; i++) if (names[i] !== '0') put(names[i]!, '0', toGround[i]!)
  return lines
}

/** Nodes of a circuit's leads, from terminal 1 to terminal 2. */
function leadNodes({ circuits, node }: Network, c: number): number[] {
  const { from, tubes } = circuits[c]!
  return Array.from({ length: tubes.length + 1 }, (_, k) => node[from]! + k)
}

function expectedLines(
  { network }: DeckContents,
  { re, im }: PotentialField,
  names: readonly string[],
): string[] {
  return network.circuits.flatMap((_, c) =>
    leadNodes(network, c).map((node) => {
      const volts = Math.hypot(re[node]!, im[node]!)
      const angle = (Math.atan2(im[node]!, re[node]!) * 180) / Math.PI
      return `*   ${names[node]!}  ${volts.toFixed(2)}  ${angle.toFixed(3).replace(/^-(0\.0*)$/, '$1')}`
    }),
  )
}
