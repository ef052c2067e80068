/** Do the names of a file fit together? Ids, ends, strings, routes; all on the values as read, whatever their form. */
import { chartKind } from './chart-key.js'
import type { KeyPath } from './document.js'
import { enteringEnd, leavingEnd, partOf, sideOf } from './ends.js'
import { nearest } from './nearest.js'
import { cleaned, hasActing } from './printable.js'
import type { Facts, IdFault, PartWord } from './problems.js'
import { entriesOf, type Keyed, keyedAt, keyedOf, nameText, type Reading, wirings } from './reading.js'

/** The parts of a file by id. */
export type Parts = ReadonlyMap<string, { readonly kind: PartWord; readonly offset: number }>

const lists = [
  ['tubes', 'tube'],
  ['supplies', 'supply'],
  ['metal', 'metal'],
] as const

export function checkReferences(reading: Reading): void {
  const parts = partsOf(reading)
  const { value } = reading
  checkWiring(reading, parts, value.circuits, ['circuits'], 'the wiring')
  for (const { entry, path } of keyedOf(value.variants, ['variants'])) {
    const name = `variant "${cleaned(nameText(entry.name) ?? '')}"`
    checkWiring(reading, parts, entry.circuits, [...path, 'circuits'], name)
  }
  for (const { entry, path } of wirings(value)) checkJoints(reading, parts, entry, path)
  checkRoutes(reading, parts)
  checkNames(reading)
  checkCharts(reading)
}

/** All parts; an id that cannot be used or is taken is reported. */
function partsOf({ value, places, report }: Reading): Parts {
  const named = lists.flatMap(([list, kind]) =>
    keyedOf(value[list], [list]).flatMap(({ entry, path }) => {
      const id = nameText(entry.id)
      return id === undefined ? [] : [{ id, kind, offset: places.value([...path, 'id']) }]
    }),
  )
  const parts = new Map<string, { kind: PartWord; offset: number }>()
  for (const { id, kind, offset } of named.sort((a, b) => a.offset - b.offset)) {
    const why = idFault(id)
    const first = parts.get(id)
    if (why) report(offset, { code: 'bad-id', id, why })
    else if (first) report(offset, { code: 'duplicate-id', id, firstLine: places.place(first.offset).line })
    if (!first) parts.set(id, { kind, offset })
  }
  return parts
}

function idFault(id: string): IdFault | undefined {
  if (id.trim() === '') return 'empty'
  if (id.length > 40) return 'too-long'
  if (hasActing(id)) return 'characters'
  if (id.trim() !== id) return 'spaces'
  if (id.startsWith('-')) return 'minus'
  if (id.includes('–')) return 'dash'
  return id === 'face' ? 'reserved' : undefined
}

const idsOf = (parts: Parts, kind: PartWord): string[] =>
  [...parts].flatMap(([id, part]) => (part.kind === kind ? [id] : []))

/** Is this the id of such a part? Reports it where not; gives the part that was probably meant. */
function known(
  { report }: Reading,
  parts: Parts,
  id: string,
  wanted: PartWord,
  offset: number,
): string | undefined {
  const is = parts.get(id)?.kind
  if (is === wanted) return id
  const names = idsOf(parts, wanted)
  const near = is === undefined ? nearest(id, names) : undefined
  report(offset, {
    code: 'unknown-id',
    id,
    wanted,
    known: names,
    ...(is === undefined ? {} : { is }),
    ...(near === undefined ? {} : { nearest: near }),
  })
  return near
}

interface Entry {
  readonly tube: string
  readonly reversed: boolean
  readonly path: KeyPath
}

function stringOf(circuit: Keyed, path: KeyPath): Entry[] {
  return entriesOf(circuit.string, [...path, 'string']).flatMap(({ entry, path: at }) => {
    const text = nameText(entry)
    if (text === undefined) return []
    const reversed = text.startsWith('-')
    return [{ tube: reversed ? text.slice(1) : text, reversed, path: at }]
  })
}

/** Every tube once, every supply at most once. */
function checkWiring(reading: Reading, parts: Parts, circuits: unknown, path: KeyPath, wiring: string): void {
  const { places, report } = reading
  const tubes = new Map<string, number>()
  const supplies = new Map<string, number>()
  const line = (offset: number) => places.place(offset).line
  const found = keyedOf(circuits, path)
  for (const { entry: circuit, path: at } of found) {
    const supply = nameText(circuit.supply)
    const offset = places.value([...at, 'supply'])
    if (supply !== undefined) {
      const first = supplies.get(supply)
      if (first !== undefined)
        report(offset, { code: 'supply-used-twice', supply, firstLine: line(first), wiring })
      else if (known(reading, parts, supply, 'supply', offset)) supplies.set(supply, offset)
    }
    for (const { tube, path: place } of stringOf(circuit, at)) {
      const here = places.value(place)
      const first = tubes.get(tube)
      if (first !== undefined && parts.get(tube)?.kind === 'tube')
        report(here, { code: 'tube-used-twice', tube, firstLine: line(first), wiring })
      else {
        // a misspelt tube is not missing as well
        const meant = known(reading, parts, tube, 'tube', here)
        if (meant !== undefined && !tubes.has(meant)) tubes.set(meant, here)
      }
    }
  }
  // strings that could not be read leave no say about what is unused
  const readable =
    found.length > 0 && found.every(({ entry }) => Array.isArray(entry.string) && entry.string.length > 0)
  if (!readable) return
  for (const tube of idsOf(parts, 'tube').filter((id) => idFault(id) === undefined)) {
    const inFile = path[0] === 'circuits' ? parts.get(tube)?.offset : undefined
    if (!tubes.has(tube)) report(inFile ?? places.key(path), { code: 'tube-unused', tube, wiring })
  }
}

/** An end as its part and side; undefined where the part or the side does not exist. */
function endOf(parts: Parts, end: string): { id: string; kind: PartWord; side: string } | undefined {
  const [id, side] = [partOf(end), sideOf(end)]
  const kind = parts.get(id)?.kind
  const sides = kind === 'tube' ? ['a', 'b'] : kind === 'supply' ? ['1', '2'] : []
  return kind !== undefined && sides.includes(side) ? { id, kind, side } : undefined
}

/** Reports an end that does not exist. */
function badEnd(parts: Parts, end: string): Facts {
  const part = parts.get(partOf(end))?.kind
  const ends = [...parts].flatMap(([id, { kind }]) =>
    kind === 'tube' ? [`${id}.a`, `${id}.b`] : kind === 'supply' ? [`${id}.1`, `${id}.2`] : [],
  )
  const near = part === undefined ? nearest(end, ends) : undefined
  return {
    code: 'bad-end',
    end,
    ...(part === undefined ? {} : { part }),
    ...(near === undefined ? {} : { nearest: near }),
  }
}

function checkRoutes({ value, places, report }: Reading, parts: Parts): void {
  const seen = new Map<string, number>()
  for (const { entry: circuit, path } of keyedOf(value.circuits, ['circuits']))
    for (const { entry: route, path: at } of keyedOf(circuit.leads, [...path, 'leads'])) {
      const offset = places.value([...at, 'between'])
      const named = entriesOf(route.between, [...at, 'between']).flatMap(({ entry, path: place }) => {
        const end = nameText(entry)
        return end === undefined ? [] : [{ end, offset: places.value(place), part: endOf(parts, end) }]
      })
      for (const { end, offset: here, part } of named) if (!part) report(here, badEnd(parts, end))
      const [one, two] = named
      if (!one?.part || !two?.part || named.length > 2) continue
      const ends = [one.end, two.end] as const
      const key = [...ends].sort().join(' ')
      const first = seen.get(key)
      const supplies = one.part.kind === 'supply' && two.part.kind === 'supply'
      if (one.part.id === two.part.id || supplies) report(offset, { code: 'never-joined', ends })
      else if (first !== undefined)
        report(offset, { code: 'duplicate-route', ends, firstLine: places.place(first).line })
      else seen.set(key, offset)
    }
}

/** The midpoint return and the measured ends of a circuit. */
function checkJoints(reading: Reading, parts: Parts, circuit: Keyed, path: KeyPath): void {
  const { value, places, report } = reading
  const string = stringOf(circuit, path)
  const supply = nameText(circuit.supply) ?? ''
  const inCircuit = (id: string) => id === supply || string.some(({ tube }) => tube === id)
  const check = (end: string, offset: number): boolean => {
    const part = endOf(parts, end)
    if (!part) report(offset, badEnd(parts, end))
    else if (!inCircuit(part.id)) report(offset, { code: 'not-in-circuit', end, supply })
    return part !== undefined && inCircuit(part.id)
  }
  for (const end of Object.keys(keyedAt(keyedAt(circuit.measured).ma)))
    check(end, places.key([...path, 'measured', 'ma', end]))

  const back = nameText(circuit.midpoint_return)
  if (back === undefined) return
  const offset = places.value([...path, 'midpoint_return'])
  const [first, last] = [string[0], string.at(-1)]
  const outer = [supply, first && enteringEnd(first), last && leavingEnd(last)]
  if (!check(back, offset)) return
  if (outer.includes(back) || endOf(parts, back)?.kind === 'supply') {
    report(offset, { code: 'no-joint', end: back })
    return
  }
  const feeds = keyedOf(value.supplies, ['supplies']).find(({ entry }) => nameText(entry.id) === supply)
  const grounding = feeds?.entry.grounding
  if (grounding === 'one-end' || grounding === 'none') report(offset, { code: 'no-midpoint', supply })
}

function checkNames({ value, places, report }: Reading): void {
  const tooLong = (what: string, text: string | undefined, path: KeyPath) => {
    if (text !== undefined && text.length > 200)
      report(places.value(path), { code: 'bad-name', what, why: 'too-long' })
  }
  tooLong('title', nameText(value.title), ['title'])
  for (const { entry, path } of entriesOf(value.rules, ['rules'])) {
    const text = nameText(entry)
    if (text === undefined) continue
    tooLong('the rule set', text, path)
    const why = text.trim() === '' ? 'empty' : hasActing(text) ? 'characters' : undefined
    if (why) report(places.value(path), { code: 'bad-name', what: 'the rule set', why })
  }
  const seen = new Map<string, number>()
  for (const { entry, path } of keyedOf(value.variants, ['variants'])) {
    const written = nameText(entry.name)
    if (written === undefined) continue
    const [name, at] = [cleaned(written), places.value([...path, 'name'])]
    tooLong('the name', name, [...path, 'name'])
    const first = seen.get(name)
    if (name === '') report(at, { code: 'bad-name', what: 'the name', why: 'empty' })
    else if (first !== undefined)
      report(at, { code: 'duplicate-name', name, firstLine: places.place(first).line })
    else seen.set(name, at)
  }
}

function checkCharts({ value, places, report }: Reading): void {
  for (const { entry, path } of keyedOf(value.supplies, ['supplies']))
    for (const key of Object.keys(keyedAt(entry.chart_m)))
      if (!chartKind(key)) report(places.key([...path, 'chart_m', key]), { code: 'bad-chart-key', key })
}
