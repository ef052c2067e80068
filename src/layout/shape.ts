/** Does the file have the form of a layout? Issues of zod → problems with places. */
import type { z } from 'zod'
import type { KeyPath } from './document.js'
import { nearest } from './nearest.js'
import { isForm } from './problem-text.js'
import { type Facts, type Form, foundIn } from './problems.js'
import { entriesOf, isKeyed, type Reading } from './reading.js'
import {
  type FileValue,
  fileShape,
  knownKeys,
  type MetalKind,
  type MetalValue,
  metalKinds,
  metalShapes,
} from './schema.js'

type Issue = z.core.$ZodIssue

export interface Shaped {
  readonly file: FileValue
  readonly metal: readonly MetalValue[]
}

/** What the words of a problem need to know about a kind of file. */
export interface Naming {
  /** the keys known in the mapping at a path */
  readonly known: (path: KeyPath) => readonly string[]
  /** what lacks a key, by the key that holds it, as `tubes` → `this tube` */
  readonly holders: Readonly<Record<string, string>>
}

/** The typed values of the file, or problems in the reading. */
export function shapedFile(reading: Reading): Shaped | undefined {
  const parsed = fileShape.safeParse(reading.value)
  const naming: Naming = { known: (path) => knownKeys[mappingName(path)] ?? [], holders }
  for (const issue of parsed.error?.issues ?? []) reportIssue(reading, issue, [], naming)
  const metal = entriesOf(reading.value.metal, ['metal']).map(({ entry, path }) =>
    shapedMetal(reading, entry, path),
  )
  const sound = metal.filter((part) => part !== undefined)
  return parsed.success && sound.length === metal.length ? { file: parsed.data, metal: sound } : undefined
}

/** The shape keys that an entry of `metal` has; a proper one has one. */
const kindsOfMetal = (entry: unknown): MetalKind[] =>
  isKeyed(entry) ? metalKinds.filter((kind) => Object.hasOwn(entry, kind)) : []

function shapedMetal(reading: Reading, entry: unknown, path: KeyPath): MetalValue | undefined {
  const kinds = kindsOfMetal(entry)
  const [kind] = kinds
  if (!isKeyed(entry)) {
    const facts: Facts = { code: 'wrong-form', what: 'metal', form: 'mapping', found: foundIn(entry) }
    reading.report(reading.places.value(path), facts)
    return undefined
  }
  if (kind === undefined || kinds.length > 1) {
    reading.report(reading.places.value(path), { code: 'metal-kind', given: kinds })
    return undefined
  }
  const parsed = metalShapes[kind].safeParse(entry)
  const naming: Naming = { known: () => knownKeys[`metal.${kind}`] ?? [], holders }
  for (const issue of parsed.error?.issues ?? []) reportIssue(reading, issue, path, naming)
  return parsed.data
}

/** Reports one issue of zod, found under `base`, as a problem with its place. */
export function reportIssue(reading: Reading, issue: Issue, base: KeyPath, naming: Naming): void {
  const path = [...base, ...issue.path]
  const { places, report } = reading
  if (issue.code === 'unrecognized_keys') {
    const known = naming.known(path)
    for (const key of issue.keys) report(places.key([...path, key]), unknownKey(key, known))
    return
  }
  if (issue.code === 'invalid_union') {
    const inner = innerIssues(issue)
    if (inner) {
      for (const one of inner) reportIssue(reading, one, path, naming)
      return
    }
  }
  const key = path.at(-1)
  const around = valueAt(reading.value, path.slice(0, -1))
  if (typeof key === 'string' && isKeyed(around) && !Object.hasOwn(around, key)) {
    const form = formOf(issue)
    const choices = issue.message === 'version' ? [] : choicesOf(issue)
    report(places.value(path.slice(0, -1)), {
      code: 'missing-key',
      key,
      of: holder(path, naming),
      form,
      choices,
    })
    return
  }
  report(places.value(path), valueFacts(issue, path, valueAt(reading.value, path)))
}

const unknownKey = (key: string, known: readonly string[]): Facts => {
  const near = nearest(key, known)
  return near === undefined
    ? { code: 'unknown-key', key, known }
    : { code: 'unknown-key', key, known, nearest: near }
}

/** The issues inside the branch of a union that the value was meant for, if one is plain. */
function innerIssues(issue: z.core.$ZodIssueInvalidUnion): Issue[] | undefined {
  return issue.errors.find((branch) => branch.length > 0 && branch.every((inner) => inner.path.length > 0))
}

function valueFacts(issue: Issue, path: KeyPath, value: unknown): Facts {
  const what = subject(path)
  const found = foundIn(value)
  if (issue.message === 'version') return { code: 'format-version', found }
  const choices = choicesOf(issue)
  if (choices.length > 0 && found.kind !== 'not-finite') {
    const orNumber = issue.code === 'invalid_union'
    const near = typeof value === 'string' ? nearest(value, choices) : undefined
    const facts = { code: 'not-a-choice', what, found, choices, orNumber } as const
    return near === undefined ? facts : { ...facts, nearest: near }
  }
  if (issue.code === 'too_small' && issue.minimum === 1) return { code: 'empty-list', what }
  return { code: 'wrong-form', what, form: formOf(issue), found }
}

const formOf = ({ message }: Issue): Form => (isForm(message) ? message : 'text')

function choicesOf(issue: Issue): string[] {
  if (issue.code === 'invalid_value') return issue.values.map(String)
  if (issue.code === 'invalid_union') return issue.errors.flat().flatMap(choicesOf)
  return []
}

/** The nearest key of a path in words, with the place in its list. */
function subject(path: KeyPath): string {
  const at = path.findLastIndex((key) => typeof key === 'string')
  const entries = path.slice(at + 1).map((key) => Number(key) + 1)
  const name = at < 0 ? 'the file' : String(path[at])
  return entries.length === 0 ? name : `${name}, entry ${entries.join('.')}`
}

const holders: Readonly<Record<string, string>> = {
  tubes: 'this tube',
  supplies: 'this supply',
  circuits: 'this circuit',
  leads: 'this lead',
  metal: 'this metal',
  variants: 'this variant',
  face: 'the face',
}

/** What lacks the key that ends the path. */
const holder = (path: KeyPath, naming: Naming): string => {
  const around = path.slice(0, -1).findLast((key) => typeof key === 'string')
  return around === undefined ? 'the file' : (naming.holders[String(around)] ?? String(around))
}

const mappingName = (path: KeyPath): string => {
  const names = path.filter((key) => typeof key === 'string')
  const last = names.at(-1) ?? ''
  return last === 'circuits' && names[0] === 'variants' ? 'variants.circuits' : last
}

function valueAt(value: unknown, path: KeyPath): unknown {
  let at = value
  for (const key of path) {
    if (Array.isArray(at)) at = at[Number(key)]
    else at = isKeyed(at) ? at[String(key)] : undefined
  }
  return at
}
