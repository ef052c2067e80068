/**
 * A YAML text to be changed in places: where its parts stand, and the smallest change that sets, removes or appends one.
 * yaml's own printing is not used on the document: it would reformat. What cannot be changed in place (a part behind
 * an alias) gives no patches; whoever writes the text checks that it reads back as meant.
 */
import {
  type Document,
  isAlias,
  isMap,
  isScalar,
  isSeq,
  type Node,
  type Pair,
  parseDocument,
  type YAMLMap,
} from 'yaml'

/** The text being edited, parsed; `newline` is the line end it uses. */
export interface Page {
  readonly document: Document
  readonly source: string
  readonly newline: string
}

/** Replaces source[start, end) by `text`. */
export interface Patch {
  readonly start: number
  readonly end: number
  readonly text: string
}

export type Path = readonly (string | number)[]

export const pageOf = (source: string): Page => ({
  document: parseDocument(source),
  source,
  newline: source.includes('\r\n') ? '\r\n' : '\n',
})

/** The source with all patches; those at one place stand in the order given. Only removals may overlap. */
export function patched(source: string, patches: readonly Patch[]): string {
  let text = ''
  let done = 0
  for (const { start, end, text: put } of [...patches].sort((a, b) => a.start - b.start)) {
    text += source.slice(done, Math.max(start, done)) + put
    done = Math.max(end, done)
  }
  return text + source.slice(done)
}

/** The node at a path; undefined where there is none, or only behind an alias. */
export function nodeAt({ document }: Page, path: Path): Node | undefined {
  return asNode(document.getIn(path, true))
}

const asNode = (value: unknown): Node | undefined =>
  isScalar(value) || isMap(value) || isSeq(value) || isAlias(value) ? value : undefined

/** start and end of a node's own text: without its anchor, and without comments and blank lines behind it */
function extent(node: Node): [number, number] {
  const range = node.range
  if (!range) throw new Error('a node of a parsed document has a range')
  return [range[0], range[1]]
}

export function replaced(page: Page, node: Node, text: string): Patch {
  const [start, end] = extent(node)
  // the text of a block of lines reaches to the start of the next line
  return { start, end: Math.max(start, contentEnd(page, end)), text }
}

/** Sets a key of a mapping: replaces its value, or puts it behind that of the key `behind`. */
export function setKey(page: Page, path: Path, key: string, text: string, behind: string): Patch[] {
  const map = nodeAt(page, path)
  if (!isMap(map)) return []
  const old = nodeAt(page, [...path, key])
  if (old) return [replaced(page, old, text)]
  const before = asNode(pairOf(map, behind)?.value)
  if (!before) return []
  const [, end] = extent(before)
  if (map.flow) return [{ start: end, end, text: `, ${key}: ${text}` }]
  // on a line of its own, so that a comment stays with the line it stands on
  const at = lineEnd(page, end)
  return [{ start: at, end: at, text: `${page.newline}${indentOf(page, map)}${key}: ${text}` }]
}

/** Takes a key out of a mapping, in block form with its lines. */
export function removeKey(page: Page, path: Path, key: string): Patch[] {
  const map = nodeAt(page, path)
  if (!isMap(map)) return []
  const i = map.items.findIndex((pair) => isScalar(pair.key) && pair.key.value === key)
  const [start, end] = pairExtent(map.items[i])
  if (start === undefined || end === undefined) return []
  const [before, behind] = [pairExtent(map.items[i - 1]), pairExtent(map.items[i + 1])]
  if (map.flow || before[1] === undefined) {
    if (behind[0] !== undefined) return [{ start, end: behind[0], text: '' }]
    return before[1] === undefined ? [] : [{ start: before[1], end, text: '' }]
  }
  const first = lineStart(page, start)
  const last = lineEnd(page, contentEnd(page, end))
  // with the line end in front of it, so that the last line of the file keeps its own way of ending
  const from = page.source.slice(0, first).endsWith('\r\n') ? first - 2 : first - 1
  return [{ start: from, end: last, text: '' }]
}

const pairOf = (map: YAMLMap, key: string): Pair | undefined =>
  map.items.find((pair) => isScalar(pair.key) && pair.key.value === key)

function pairExtent(pair: Pair | undefined): [number, number] | [undefined, undefined] {
  const key = asNode(pair?.key)
  if (!key) return [undefined, undefined]
  return [extent(key)[0], extent(asNode(pair?.value) ?? key)[1]]
}

/** An entry of a list in both forms: on one line, and as the lines behind a dash. */
export interface Entry {
  readonly flow: string
  readonly block: readonly string[]
}

/** Puts entries behind the last one of a list; a list that is not there yet comes to the end of the document. */
export function append(page: Page, path: Path, entries: readonly Entry[]): Patch[] {
  if (entries.length === 0) return []
  const list = nodeAt(page, path)
  const [key] = path
  if (!list) return path.length === 1 && key !== undefined ? addedList(page, String(key), entries) : []
  if (!isSeq(list)) return []
  const [start, end] = extent(list)
  const flow = entries.map((e) => e.flow).join(', ')
  if (list.flow) {
    const last = asNode(list.items.at(-1))
    if (!last) return [{ start: start + 1, end: start + 1, text: flow }]
    const at = extent(last)[1]
    return [{ start: at, end: at, text: `, ${flow}` }]
  }
  const at = lineEnd(page, contentEnd(page, end))
  return [{ start: at, end: at, text: blockText(page, ' '.repeat(columnOf(page, start)), entries) }]
}

/** The lines of a list, each with a line end in front. */
const blockText = ({ newline }: Page, indent: string, entries: readonly Entry[]): string =>
  entries
    .flatMap(({ block: [first, ...rest] }) => [`- ${first}`, ...rest.map((line) => `  ${line}`)])
    .map((line) => `${newline}${indent}${line}`)
    .join('')

function addedList(page: Page, key: string, entries: readonly Entry[]): Patch[] {
  const { document, source, newline } = page
  const root = document.contents
  if (!isMap(root)) return []
  if (root.flow) {
    const end = pairExtent(root.items.at(-1))[1]
    const text = `, ${key}: [${entries.map((e) => e.flow).join(', ')}]`
    return end === undefined ? [] : [{ start: end, end, text }]
  }
  // in front of the mark that ends a document, where there is one
  const mark = /^\.\.\.(?=\s|$)/m.exec(source.slice(extent(root)[1]))
  const at = mark ? extent(root)[1] + mark.index : source.length
  const indent = indentOf(page, root)
  const text = `${indent}${key}:${blockText(page, `${indent}  `, entries)}`
  const ended = at === 0 || source[at - 1] === '\n'
  return [{ start: at, end: at, text: ended ? `${text}${newline}` : `${newline}${text}` }]
}

/** Writes the entries of a list of scalars anew, in the form that the list has. */
export function rewritten(page: Page, list: Node, entries: readonly string[]): Patch {
  const flow = `[${entries.join(', ')}]`
  if (!isSeq(list) || list.flow) return replaced(page, list, flow)
  const [start] = extent(list)
  const text = blockText(
    page,
    ' '.repeat(columnOf(page, start)),
    entries.map((e) => ({ flow: e, block: [e] })),
  )
  return replaced(page, list, text.trimStart())
}

/** the blanks in front of the keys of a block mapping */
const indentOf = (page: Page, map: YAMLMap): string =>
  ' '.repeat(columnOf(page, pairExtent(map.items[0])[0] ?? extent(map)[0]))

// a byte order mark takes no column
const columnOf = (page: Page, at: number): number =>
  page.source.slice(lineStart(page, at), at).replace('\ufeff', '').length

const lineStart = ({ source }: Page, at: number): number => source.lastIndexOf('\n', at - 1) + 1

/** end of the line that holds this place, in front of its line end */
function lineEnd({ source }: Page, at: number): number {
  const newline = source.indexOf('\n', at)
  if (newline < 0) return source.length
  return source[newline - 1] === '\r' && newline - 1 >= at ? newline - 1 : newline
}

/** `end` without the blanks and line ends in front of it */
function contentEnd({ source }: Page, end: number): number {
  let at = end
  while (at > 0 && /\s/.test(source[at - 1]!)) at--
  return at
}
