/**
 * The edited sign as a change of the file's text: only the bytes of what was edited are replaced, everything else
 * (comments, order, alignment, line ends) stays.
 */
import { isScalar, isSeq } from 'yaml'
import type {
  CircuitWiring,
  Layout,
  Measured,
  PathPoint,
  StringEntry,
  Variant,
  Wiring,
} from '../layout/layout.js'
import { supplyKeys } from '../layout/ranges.js'
import { metresPerUnit } from '../layout/reading.js'
import type { Sign } from './edit.js'
import {
  append,
  type Entry,
  nodeAt,
  type Page,
  type Patch,
  type Path,
  pageOf,
  patched,
  removeKey,
  replaced,
  rewritten,
  setKey,
} from './page.js'

/**
 * The source with the differences between the sign it holds (`from`) and the edited one (`to`) written in. What the
 * text has no place for (a circuit taken away, parts behind an alias) is left out: read the text back before using it.
 */
export function editedText(source: string, from: Sign, to: Sign): string {
  const page = pageOf(source)
  return patched(source, [
    ...wiringPatches(page, ['circuits'], from.wiring, to.wiring),
    ...supplyPatches(page, from.layout, to.layout),
    ...tubePatches(page, from.layout, to.layout),
    ...variantPatches(page, from.layout, to.layout),
  ])
}

const plain = /^[\p{L}_][\p{L}\p{N}_.-]*$/u
/** plain words that YAML takes for something else than text */
const reserved = /^(true|false|null)$/i
const scalarText = (text: string): string =>
  plain.test(text.replace(/^-/, '')) && !reserved.test(text) ? text : JSON.stringify(text)
const entryName = ({ tube, reversed }: StringEntry): string => `${reversed ? '-' : ''}${tube}`
const entryText = (entry: StringEntry): string => scalarText(entryName(entry))
const stringText = (string: readonly StringEntry[]): string => `[${string.map(entryText).join(', ')}]`

/** Nine digits, and nothing below a billionth of the unit: what arithmetic leaves behind is not written. */
const numberText = (value: number): string =>
  String(Math.round(Number(value.toPrecision(9)) * 1e9) / 1e9).replace(/^-0$/, '0')

function wiringPatches(page: Page, path: Path, from: Wiring, to: Wiring): Patch[] {
  const changed = to.circuits
    .slice(0, from.circuits.length)
    .flatMap((circuit, i) => circuitPatches(page, [...path, i], from.circuits[i]!, circuit))
  const added = to.circuits.slice(from.circuits.length).map((c): Entry => {
    const text = circuitText(c)
    return { flow: text, block: [text] }
  })
  return [...changed, ...append(page, path, added)]
}

function circuitPatches(page: Page, path: Path, from: CircuitWiring, to: CircuitWiring): Patch[] {
  const key = (name: string, was: string | undefined, is: string | undefined): Patch[] => {
    if (was === is) return []
    return is === undefined ? removeKey(page, path, name) : setKey(page, path, name, is, 'string')
  }
  return [
    ...key('supply', scalarText(from.supply), scalarText(to.supply)),
    ...stringPatches(page, [...path, 'string'], from.string, to.string),
    ...key('midpoint_return', returnText(from), returnText(to)),
    ...key('measured', measuredText(from.measured), measuredText(to.measured)),
  ]
}

const returnText = ({ midpointReturn }: CircuitWiring): string | undefined =>
  midpointReturn === undefined ? undefined : scalarText(midpointReturn)

function measuredText(measured: Measured | undefined): string | undefined {
  if (!measured) return undefined
  const { primaryPower, currents } = measured
  const ends = [...currents].map(([end, amperes]) => `${scalarText(end)}: ${numberText(amperes * 1000)}`)
  const parts = [
    ...(primaryPower === undefined ? [] : [`primary_w: ${numberText(primaryPower)}`]),
    ...(ends.length > 0 ? [`ma: {${ends.join(', ')}}`] : []),
  ]
  return `{${parts.join(', ')}}`
}

/** A string of the same length keeps its layout on the page: only the entries that moved are replaced. */
function stringPatches(
  page: Page,
  path: Path,
  from: readonly StringEntry[],
  to: readonly StringEntry[],
): Patch[] {
  const node = nodeAt(page, path)
  if (!node || stringText(from) === stringText(to)) return []
  const written = writtenEntries(page, path)
  const texts = to.map((entry) => asWritten(entry, written.get(entry.tube)))
  if (!isSeq(node) || node.items.length !== to.length) return [rewritten(page, node, texts)]
  return to.flatMap((entry, i) => {
    const old = nodeAt(page, [...path, i])
    const same = from[i] !== undefined && entryName(from[i]) === entryName(entry)
    return old && !same ? [replaced(page, old, texts[i]!)] : []
  })
}

/** How each tube is written in a string of the text, quotes and all. */
function writtenEntries(page: Page, path: Path): Map<string, string> {
  const list = nodeAt(page, path)
  const written = new Map<string, string>()
  if (!isSeq(list)) return written
  for (const node of list.items) {
    if (!isScalar(node) || !node.range) continue
    const text = page.source.slice(node.range[0], node.range[1])
    written.set(String(node.value).replace(/^-/, ''), text)
  }
  return written
}

/** An entry as the file writes this tube (quoted or not), with the sign it has now. */
function asWritten(entry: StringEntry, written: string | undefined): string {
  const name = written?.replace(/^(["']?)-?/, '$1')
  const quote = name?.[0] === '"' || name?.[0] === "'" ? name[0] : ''
  if (name !== `${quote}${entry.tube}${quote}` || reserved.test(name)) return entryText(entry)
  return `${quote}${entry.reversed ? '-' : ''}${name.slice(quote.length)}`
}

function supplyPatches(page: Page, from: Layout, to: Layout): Patch[] {
  const unit = metresPerUnit(from.units)
  const pointText = ({ x, y, z }: PathPoint) =>
    `[${[x, y, ...(z === undefined ? [] : [z])].map((metres) => numberText(metres / unit)).join(', ')}]`
  const placed = (i: number) => nodeAt(page, ['supplies', i, 'terminals']) !== undefined
  const moved = (i: number) => to.supplies[i]?.terminals !== from.supplies[i]?.terminals
  // supplies without a place share an assumed one: once one of them is put somewhere, the others need theirs too
  const spread = to.supplies.some((_, i) => moved(i) && !placed(i))
  return to.supplies.flatMap((supply, i) => {
    const old = from.supplies[i]
    if (!old) return []
    const set = (key: string, changed: boolean, text: () => string) =>
      changed ? setKey(page, ['supplies', i], key, text(), 'id') : []
    const figure = (name: keyof typeof supplyKeys) => {
      const [key, inFile] = supplyKeys[name]
      const value = supply[name]
      if (value === undefined) return old[name] === undefined ? [] : removeKey(page, ['supplies', i], key)
      return set(key, value !== old[name], () => numberText(value * inFile))
    }
    return [
      ...set('type', supply.type !== old.type, () => supply.type),
      ...figure('noLoadVoltage'),
      ...figure('noLoadPeak'),
      ...figure('shortCircuitCurrent'),
      ...figure('frequency'),
      ...set('grounding', supply.grounding !== old.grounding, () => supply.grounding),
      ...figure('ratedPower'),
      ...figure('groundFaultTrip'),
      ...figure('maxLead'),
      ...set(
        'terminals',
        moved(i) || (spread && !placed(i)),
        () => `[${supply.terminals.map(pointText).join(', ')}]`,
      ),
    ]
  })
}

function tubePatches(page: Page, from: Layout, to: Layout): Patch[] {
  const unit = metresPerUnit(from.units)
  return to.tubes.flatMap((tube, i) => {
    const old = from.tubes[i]
    const set = (key: string, changed: boolean, text: string) =>
      changed ? setKey(page, ['tubes', i], key, text, 'id') : []
    return [
      ...set('height', tube.height !== old?.height, numberText(tube.height / unit)),
      ...set('fill', tube.fill !== old?.fill, tube.fill),
    ]
  })
}

/** Changed variants are rewritten in place, new ones are added behind the last. */
function variantPatches(page: Page, from: Layout, to: Layout): Patch[] {
  const changed = to.variants.flatMap((variant, i) => {
    const old = from.variants[i]
    if (old?.name !== variant.name || old === variant) return []
    const path: Path = ['variants', i, 'circuits']
    if (old.circuits.length === variant.circuits.length) return wiringPatches(page, path, old, variant)
    // variants hold no routes: nothing is lost when their circuits are written anew
    const list = nodeAt(page, path)
    return list ? [rewritten(page, list, variant.circuits.map(circuitText))] : []
  })
  const added = to.variants.slice(from.variants.length).map((v): Entry => {
    const [name, circuits] = [`name: ${scalarText(v.name)}`, `circuits: ${circuitsText(v)}`]
    return { flow: `{${name}, ${circuits}}`, block: [name, circuits] }
  })
  return [...changed, ...append(page, ['variants'], added)]
}

const circuitsText = ({ circuits }: Variant): string => `[${circuits.map(circuitText).join(', ')}]`

function circuitText(circuit: CircuitWiring): string {
  const [back, measured] = [returnText(circuit), measuredText(circuit.measured)]
  return [
    `{supply: ${scalarText(circuit.supply)}, string: ${stringText(circuit.string)}`,
    ...(back === undefined ? [] : [`midpoint_return: ${back}`]),
    ...(measured === undefined ? [] : [`measured: ${measured}`]),
  ]
    .join(', ')
    .concat('}')
}
