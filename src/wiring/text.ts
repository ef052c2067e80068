/**
 * The edited sign as a change of the file's text: only the bytes of what was edited are replaced, everything else
 * (comments, order, alignment, line ends) stays. yaml's own printing is not used on the document: it would reformat.
 */
import { type Document, isAlias, isMap, isScalar, isSeq, type Node, parseDocument, type YAMLMap } from 'yaml'
import type {
  CircuitWiring,
  Layout,
  PathPoint,
  StringEntry,
  Supply,
  Variant,
  Wiring,
} from '../layout/layout.js'
import type { Sign } from './edits.js'

/** The text being edited, parsed; `newline` is the line end it uses. */
interface Page {
  readonly document: Document
  readonly source: string
  readonly newline: string
}

/** Replaces source[start, end) by `text`. */
interface Patch {
  readonly start: number
  readonly end: number
  readonly text: string
}

/** The source with the differences between the sign it holds (`from`) and the edited one (`to`) written in. */
export function editedText(source: string, from: Sign, to: Sign): string {
  const page: Page = {
    document: parseDocument(source),
    source,
    newline: source.includes('\r\n') ? '\r\n' : '\n',
  }
  const patches = [
    ...wiringPatches(page, from.wiring, to.wiring),
    ...supplyPatches(page, from.layout, to.layout),
    ...tubePatches(page, from.layout, to.layout),
    ...variantPatches(page, from.layout, to.layout),
  ]
  // from the back, so that earlier offsets stay true
  return patches
    .sort((a, b) => b.start - a.start)
    .reduce((text, { start, end, text: put }) => text.slice(0, start) + put + text.slice(end), source)
}

const plain = /^[\p{L}_][\p{L}\p{N}_.-]*$/u
const scalarText = (text: string): string =>
  plain.test(text.replace(/^-/, '')) ? text : JSON.stringify(text)
const entryText = ({ tube, reversed }: StringEntry): string => scalarText(`${reversed ? '-' : ''}${tube}`)
const stringText = (string: readonly StringEntry[]): string => `[${string.map(entryText).join(', ')}]`
const numberText = (value: number): string => String(Number(value.toPrecision(9)))

/** start and end of a node's own text, without trailing comments and blank lines */
function extent(node: Node): [number, number] {
  const range = node.range
  if (!range) throw new Error('a node of a parsed document has a range')
  return [range[0], range[1]]
}

const replaced = (node: Node, text: string): Patch => {
  const [start, end] = extent(node)
  return { start, end, text }
}

const nodeAt = ({ document }: Page, ...path: (string | number)[]): Node | undefined => {
  const found = document.getIn(path, true)
  return isScalar(found) || isMap(found) || isSeq(found) || isAlias(found) ? found : undefined
}

/** A string of the same length keeps its layout on the page: only the entries are replaced. */
function stringPatches(page: Page, path: (string | number)[], string: readonly StringEntry[]): Patch[] {
  const node = nodeAt(page, ...path)
  if (!node) return []
  if (!isSeq(node) || node.items.length !== string.length) return [replaced(node, stringText(string))]
  return string.flatMap((entry, i) => {
    const old = nodeAt(page, ...path, i)
    const text = entryText(entry)
    return old && !(isScalar(old) && String(old.value) === `${entry.reversed ? '-' : ''}${entry.tube}`)
      ? [replaced(old, text)]
      : []
  })
}

function wiringPatches(
  page: Page,
  from: Wiring,
  to: Wiring,
  path: (string | number)[] = ['circuits'],
): Patch[] {
  return to.circuits.flatMap((circuit, i) =>
    sameString(from.circuits[i], circuit) ? [] : stringPatches(page, [...path, i, 'string'], circuit.string),
  )
}

const sameString = (a: CircuitWiring | undefined, b: CircuitWiring): boolean =>
  a !== undefined && stringText(a.string) === stringText(b.string)

/** Sets `key` in a mapping that has an `id` (or other first key): replaces its value or puts it behind the anchor. */
function keyPatch(page: Page, path: (string | number)[], anchor: string, key: string, text: string): Patch[] {
  const map = nodeAt(page, ...path)
  if (!isMap(map)) return []
  const old = nodeAt(page, ...path, key)
  if (old) return [replaced(old, text)]
  const after = nodeAt(page, ...path, anchor)
  if (!after) return []
  const [, end] = extent(after)
  const indent = page.newline + ' '.repeat(columnOf(page, map, anchor))
  return [{ start: end, end, text: `${map.flow ? ', ' : indent}${key}: ${text}` }]
}

/** column (from 0) at which the keys of a block mapping stand */
function columnOf(page: Page, map: YAMLMap, key: string): number {
  const pair = map.items.find((p) => isScalar(p.key) && p.key.value === key)
  const start = isScalar(pair?.key) ? extent(pair.key)[0] : extent(map)[0]
  return start - (page.source.lastIndexOf('\n', start - 1) + 1)
}

function supplyPatches(page: Page, from: Layout, to: Layout): Patch[] {
  const unit = from.units === 'in' ? 0.0254 : 0.001
  const lengthText = (metres: number) => numberText(metres / unit)
  const pointText = ({ x, y, z }: PathPoint) =>
    `[${[x, y, ...(z === undefined ? [] : [z])].map(lengthText).join(', ')}]`
  return to.supplies.flatMap((supply, i) => {
    const old = from.supplies[i]
    if (!old) return []
    const set = (key: string, changed: boolean, text: () => string) =>
      changed ? keyPatch(page, ['supplies', i], 'id', key, text()) : []
    const number = (key: string, pick: (s: Supply) => number | undefined, per: number) => {
      const value = pick(supply)
      return value === undefined ? [] : set(key, value !== pick(old), () => numberText(value * per))
    }
    return [
      ...set('type', supply.type !== old.type, () => supply.type),
      ...number('no_load_kv', (s) => s.noLoadVoltage, 1e-3),
      ...number('short_circuit_ma', (s) => s.shortCircuitCurrent, 1e3),
      ...number('frequency_hz', (s) => s.frequency, 1),
      ...set('grounding', supply.grounding !== old.grounding, () => supply.grounding),
      ...number('rated_va', (s) => s.ratedPower, 1),
      ...number('ground_fault_trip_ma', (s) => s.groundFaultTrip, 1e3),
      ...number('max_lead_mm', (s) => s.maxLead, 1e3),
      ...set(
        'terminals',
        supply.terminals !== old.terminals,
        () => `[${supply.terminals.map(pointText).join(', ')}]`,
      ),
    ]
  })
}

function tubePatches(page: Page, from: Layout, to: Layout): Patch[] {
  const unit = from.units === 'in' ? 0.0254 : 0.001
  return to.tubes.flatMap((tube, i) => {
    const old = from.tubes[i]
    const set = (key: string, changed: boolean, text: string) =>
      changed ? keyPatch(page, ['tubes', i], 'id', key, text) : []
    return [
      ...set('height', tube.height !== old?.height, numberText(tube.height / unit)),
      ...set('fill', tube.fill !== old?.fill, tube.fill),
    ]
  })
}

/** Changed variants are rewritten in place, new ones are added behind the last. */
function variantPatches(page: Page, from: Layout, to: Layout): Patch[] {
  const { source, newline } = page
  const patches = to.variants.flatMap((variant, i) => {
    const old = from.variants[i]
    return old && old.name === variant.name
      ? wiringPatches(page, old, variant, ['variants', i, 'circuits'])
      : []
  })
  const added = to.variants.slice(from.variants.length)
  if (added.length === 0) return patches
  const list = nodeAt(page, 'variants')
  if (isSeq(list) && list.flow) {
    const [start, end] = extent(list)
    const text = added.map((v) => `{name: ${scalarText(v.name)}, circuits: ${circuitsText(v)}}`)
    const comma = list.items.length > 0 ? [''] : []
    return [...patches, { start: end - 1, end: end - 1, text: [...comma, ...text].join(', ') }].filter(
      () => start < end,
    )
  }
  const items = isSeq(list) ? list.items : []
  const indent = ' '.repeat(items.length > 0 && isSeq(list) ? dashColumn(source, extent(list)[0]) : 2)
  const text = added
    .map(
      (v) =>
        `${indent}- name: ${scalarText(v.name)}${newline}${indent}  circuits: ${circuitsText(v)}${newline}`,
    )
    .join('')
  if (items.length > 0 && isSeq(list)) {
    // behind the line on which the last variant ends
    const end = lastContent(source, extent(list)[1])
    const line = source.indexOf('\n', end)
    return line < 0
      ? [
          ...patches,
          { start: source.length, end: source.length, text: newline + text.slice(0, -newline.length) },
        ]
      : [...patches, { start: line + 1, end: line + 1, text }]
  }
  const gap = source.endsWith('\n') || source === '' ? '' : newline
  const finish = gap === '' ? text : text.slice(0, -newline.length)
  if (list) return [...patches, replaced(list, newline + text.trimEnd())]
  return [
    ...patches,
    { start: source.length, end: source.length, text: `${gap}variants:${newline}${finish}` },
  ]
}

const circuitsText = ({ circuits }: Variant): string =>
  `[${circuits.map((c) => `{supply: ${scalarText(c.supply)}, string: ${stringText(c.string)}}`).join(', ')}]`

const dashColumn = (source: string, start: number): number =>
  start - (source.lastIndexOf('\n', start - 1) + 1)

function lastContent(source: string, end: number): number {
  let at = end
  while (at > 0 && /\s/.test(source[at - 1]!)) at--
  return at - 1
}
