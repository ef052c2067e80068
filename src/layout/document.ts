/**
 * YAML text → plain values, and where each of them stands in the text. Hostile files (deep nesting, alias bombs,
 * endless key lists) are refused before they can cost more than the reading of their text.
 */
import {
  type Alias,
  Composer,
  type CST,
  type Document,
  isAlias,
  isMap,
  isScalar,
  isSeq,
  Lexer,
  type Node,
  type Pair,
  Parser,
  visit,
  type YAMLMap,
} from 'yaml'
import type { Facts, Place, Problem } from './problems.js'

export type KeyPath = readonly PropertyKey[]

/** Where the values of a document stand in its text: offsets, and from them places. */
export interface Places {
  /** the value at this path, or the nearest one around it that the text has */
  value(path: KeyPath): number
  /** the key that ends this path */
  key(path: KeyPath): number
  /** character `at` of the one-line text at this path, where the source shows it unchanged */
  within(path: KeyPath, at: number): number
  place(offset: number): Place
}

export interface DocumentReading {
  /** absent when the text is no usable YAML */
  readonly value?: unknown
  readonly places: Places
  readonly problems: readonly Problem[]
}

const limits = { bytes: 5_000_000, depth: 64, aliases: 10_000, values: 3_000_000 } as const

export function readDocument(text: string): DocumentReading {
  const place = placesIn(text)
  const problems: Problem[] = []
  const report = (offset: number, facts: Facts) => problems.push({ ...facts, place: place(offset) })
  const refused = (): DocumentReading => ({ places: placesOf(text, place), problems })

  refuseText(text, report)
  if (problems.length > 0) return refused()
  const tokens = documentTokens(text)
  if (!Array.isArray(tokens)) {
    report(tokens.tooDeep, { code: 'too-deep', limit: limits.depth })
    return refused()
  }

  // keys are compared here, not by yaml: it compares each key with every other one
  const options = { prettyErrors: false, uniqueKeys: false, stringKeys: true, version: '1.2' } as const
  const [document, second] = new Composer(options).compose(tokens, true, text.length)
  if (!document) return refused()
  if (second) report(secondStart(text, second.range[0]), { code: 'several-documents' })
  const { yaml } = document.directives
  if (yaml.version !== '1.2') report(0, { code: 'yaml-version', version: yaml.version })
  for (const { pos, code, message } of [...document.errors, ...document.warnings])
    report(pos[0], { code: 'yaml', rule: code, detail: message })
  if (document.errors.length > 0 || yaml.version !== '1.2') return refused()
  return documentValue(text, document, place, problems, report)
}

/** The values of a document without syntax errors. */
function documentValue(
  text: string,
  document: Document.Parsed,
  place: (offset: number) => Place,
  problems: Problem[],
  report: (offset: number, facts: Facts) => void,
): DocumentReading {
  const { targets, sound } = aliasTargets(document, report)
  const places = placesOf(text, place, document, targets)
  repeatedKeys(document, place, report)
  if (!sound) return { places, problems }
  const { contents } = document
  if (!contents || (isScalar(contents) && contents.value === null)) {
    report(0, { code: 'empty-file' })
    return { places, problems }
  }
  try {
    const value: unknown = document.toJS({ maxAliasCount: limits.aliases })
    if (targets.size === 0 || valueCount(value) <= limits.values) return { value, places, problems }
  } catch (fault) {
    if (!(fault instanceof ReferenceError)) throw fault
  }
  report(0, { code: 'too-many-aliases', limit: limits.values })
  return { places, problems }
}

// NUL and the marks that the tokenizer of yaml uses between its own tokens
const unreadable = /[\0\u0002\u0018\u001f]/

function refuseText(text: string, report: (offset: number, facts: Facts) => void): void {
  const bytes = text.length > limits.bytes / 3 ? Buffer.byteLength(text) : text.length
  if (bytes > limits.bytes) {
    report(0, { code: 'file-too-big', bytes, limit: limits.bytes })
    return
  }
  const at = text.search(unreadable)
  if (at >= 0) report(at, { code: 'unreadable-character', character: text.charCodeAt(at) })
}

/**
 * The syntax tree of the text, or where it goes deeper than any layout does: composing that would overflow the stack,
 * and building it alone can exhaust the memory.
 */
function documentTokens(text: string): CST.Token[] | { readonly tooDeep: number } {
  const parser = new Parser()
  const tokens: CST.Token[] = []
  for (const lexeme of new Lexer().lex(text)) {
    const start = parser.offset
    for (const token of parser.next(lexeme)) tokens.push(token)
    // the lowest of the stack is the document itself
    if (parser.stack.length - 1 > limits.depth) return { tooDeep: start }
  }
  for (const token of parser.end()) tokens.push(token)
  return tokens
}

const secondStart = (text: string, offset: number): number => {
  const marker = /---/g
  marker.lastIndex = offset
  return marker.exec(text)?.index ?? offset
}

/** What each alias refers to (the last anchor of its name before it); whether all of them do, and none holds itself. */
function aliasTargets(
  document: Document.Parsed,
  report: (offset: number, facts: Facts) => void,
): { targets: Map<Alias, Node>; sound: boolean } {
  const anchors = new Map<string, Node>()
  const targets = new Map<Alias, Node>()
  let sound = true
  visit(document, (_key, node, path) => {
    if (isAlias(node)) {
      const target = anchors.get(node.source)
      const offset = node.range?.[0] ?? 0
      if (!target) report(offset, { code: 'unknown-alias', name: node.source })
      else if (path.some((around) => around === target))
        report(offset, { code: 'alias-in-itself', name: node.source })
      else targets.set(node, target)
      sound &&= targets.has(node)
    } else if ((isScalar(node) || isMap(node) || isSeq(node)) && node.anchor) anchors.set(node.anchor, node)
  })
  if (targets.size > limits.aliases) {
    report(0, { code: 'too-many-aliases', limit: limits.aliases })
    sound = false
  }
  return { targets, sound }
}

function repeatedKeys(
  document: Document.Parsed,
  place: (offset: number) => Place,
  report: (offset: number, facts: Facts) => void,
): void {
  visit(document, {
    Map(_key, map) {
      const first = new Map<string, number>()
      for (const { key } of map.items) {
        if (!isScalar(key)) continue
        const [name, offset] = [String(key.value), key.range?.[0] ?? 0]
        const earlier = first.get(name)
        if (earlier === undefined) first.set(name, offset)
        else report(offset, { code: 'duplicate-key', key: name, firstLine: place(earlier).line })
      }
    },
  })
}

/** How many values a walk would meet that follows every alias. */
function valueCount(value: unknown, known = new Map<object, number>()): number {
  if (typeof value !== 'object' || value === null) return 1
  const before = known.get(value)
  if (before !== undefined) return before
  const count = Object.values(value).reduce((sum: number, part) => sum + valueCount(part, known), 1)
  known.set(value, count)
  return count
}

function placesIn(text: string): (offset: number) => Place {
  let starts: number[] | undefined
  return (offset) => {
    starts ??= [0, ...[...text.matchAll(/\n/g)].map(({ index }) => index + 1)]
    let [low, high] = [0, starts.length - 1]
    while (low < high) {
      const middle = (low + high + 1) >> 1
      if ((starts[middle] ?? 0) <= offset) low = middle
      else high = middle - 1
    }
    // a byte order mark takes no column
    const mark = low === 0 && text.startsWith('\ufeff') && offset > 0 ? 1 : 0
    return { offset, line: low + 1, column: offset - (starts[low] ?? 0) + 1 - mark }
  }
}

function placesOf(
  text: string,
  place: (offset: number) => Place,
  document?: Document.Parsed,
  targets?: ReadonlyMap<Alias, Node>,
): Places {
  const pairs = new WeakMap<YAMLMap, Map<string, Pair>>()
  const pairOf = (map: YAMLMap, key: PropertyKey): Pair | undefined => {
    const known = pairs.get(map) ?? new Map(map.items.map((pair) => [keyText(pair), pair]))
    pairs.set(map, known)
    return known.get(String(key))
  }
  // an alias stands for its target, so faults are shown where they are written
  const resolved = (node: unknown): unknown => (isAlias(node) ? (targets?.get(node) ?? node) : node)
  const step = (node: unknown, key: PropertyKey): unknown => {
    if (isMap(node)) return pairOf(node, key)?.value
    return isSeq(node) && typeof key === 'number' ? node.items[key] : undefined
  }
  const nodeAt = (path: KeyPath): unknown => {
    let node: unknown = resolved(document?.contents)
    for (const key of path) node = resolved(step(node, key))
    return node
  }
  const value = (path: KeyPath): number => {
    let offset = startOf(document?.contents) ?? 0
    let node: unknown = resolved(document?.contents)
    for (const key of path) {
      node = resolved(step(node, key))
      offset = startOf(node) ?? offset
    }
    return offset
  }
  const key = (path: KeyPath): number => {
    const last = path.at(-1)
    const around = nodeAt(path.slice(0, -1))
    const pair = isMap(around) && last !== undefined ? pairOf(around, last) : undefined
    return startOf(pair?.key) ?? value(path)
  }
  const within = (path: KeyPath, at: number): number => {
    const node = nodeAt(path)
    const start = value(path)
    if (!isScalar(node) || typeof node.value !== 'string') return start
    const first = node.type === 'PLAIN' ? start : start + 1
    return text.startsWith(node.value, first) ? first + at : start
  }
  return { value, key, within, place }
}

const keyText = ({ key }: Pair): string => (isScalar(key) ? String(key.value) : '')

function startOf(node: unknown): number | undefined {
  return isScalar(node) || isMap(node) || isSeq(node) || isAlias(node) ? node.range?.[0] : undefined
}
