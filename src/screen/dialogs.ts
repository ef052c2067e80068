/** Dialogs: what they ask, how an answer is read, and what follows. Figures typed carry the unit of their prompt. */
import type { Fill, Grounding, SupplyType } from '../layout/layout.js'
import { aboutLeads, type Symptom, symptomNamed, symptoms } from '../view/symptoms.js'
import { kvFigure, maFigure, supplyShort } from '../view/words.js'
import { findingInView, onPair } from './aim.js'
import { groundingChosen, midpointReturnHere, otherCircuits, tubeMoved } from './circuits.js'
import {
  asFiled,
  circuitUnderCursor,
  feedAt,
  figureTyped,
  fillChosen,
  heightTyped,
  linkName,
  onTube,
  variantChosen,
  variantKept,
} from './editing.js'
import type { Action } from './keys.js'
import {
  type Choice,
  type Dialog,
  freshSavings,
  type Next,
  type PickKind,
  type PromptKind,
  type State,
  type SupplyFigure,
  say,
  stay,
} from './state.js'
import {
  currentUnits,
  frequencyUnits,
  lengthUnits,
  typedFigure,
  type UnitScale,
  voltageUnits,
} from './typed.js'

const open = (state: State, dialog: Dialog): Next => {
  const { message: _, ...rest } = state
  return stay({ ...rest, dialog })
}
const ask = (state: State, prompt: PromptKind, title: string, text: string): Next =>
  open(state, { kind: 'prompt', prompt, title, text })
const choose = (state: State, pick: PickKind, title: string, choices: readonly Choice[]): Next =>
  open(state, { kind: 'pick', pick, title, choices })

export function closed(state: State): State {
  const { dialog: _, ...rest } = state
  return rest
}

/** Keys that open a dialog; undefined where the key does something else. */
export function dialogByKey(state: State, action: Action): Next | undefined {
  switch (action) {
    case 'help':
      return open(state, { kind: 'help', scroll: 0 })
    case 'cautions':
      return open(state, { kind: 'cautions', scroll: 0 })
    case 'why':
      return findingInView(state)
        ? open(state, { kind: 'why', scroll: 0 })
        : say(state, 'No pair here: Tab goes to one, or m marks a place to probe from.')
    case 'symptoms':
      return choose(
        state,
        { for: 'symptom' },
        'Symptom',
        symptoms.map(({ symptom, name }) => ({ label: name, value: symptom })),
      )
    case 'filter':
      return ask(state, { for: 'filter' }, 'Show only pairs that name (empty: all)', state.filter)
    case 'tube-height':
      return onTube(state, (tube) => askHeight(state, tube))
    case 'tube-fill':
      return onTube(state, (tube) => chooseFill(state, tube))
    case 'keep-variant':
      return ask(state, { for: 'variant-name' }, 'Keep this wiring as variant', '')
    case 'variants':
      return chooseVariant(state)
    case 'feed-here':
      return chooseLink(state)
    case 'supply-figures':
      return chooseSupply(state)
    case 'move-tube':
      return onTube(state, (tube) => chooseCircuit(state, tube))
    case 'midpoint-return':
      return midpointReturnHere(state)
    default:
      return undefined
  }
}

function askHeight(state: State, tube: string): Next {
  const { layout } = state.present.sign
  const height = layout.tubes.find((t) => t.id === tube)?.height ?? 0
  return ask(
    state,
    { for: 'tube-height', tube },
    `Height of ${tube}, ${layout.units}`,
    figureText(height / lengthUnits[layout.units]!),
  )
}

const fills: readonly Fill[] = ['neon', 'argon-mercury', 'neon-mercury']
const chooseFill = (state: State, tube: string): Next =>
  choose(
    state,
    { for: 'fill', tube },
    `Fill of ${tube}`,
    fills.map((fill) => ({ label: fill, value: fill })),
  )

function chooseVariant(state: State): Next {
  const { variants } = state.present.sign.layout
  if (variants.length === 0)
    return say(state, 'This file keeps no variants yet. V keeps the wiring on screen as one.')
  return choose(state, { for: 'variant' }, 'Variant', [
    { label: "(the file's wiring)", value: '' },
    ...variants.map((v) => ({ label: v.name, value: v.name })),
  ])
}

function chooseLink(state: State): Next {
  const circuit = circuitUnderCursor(state)
  const { string } = state.present.sign.wiring.circuits[circuit]!
  const links = string
    .slice(1)
    .map((_, i) => ({ label: linkName(state, circuit, i + 1), value: String(i + 1) }))
  if (links.length === 0)
    return say(state, 'One tube only: the feed has nowhere else to go. Swap the terminals (x) instead.')
  return choose(state, { for: 'link', circuit }, 'Move the feed to the jumper', links)
}

/** With one other circuit there is nothing to choose. */
function chooseCircuit(state: State, tube: string): Next {
  const { layout, wiring } = state.present.sign
  const [only, ...more] = otherCircuits(state, tube)
  if (only === undefined)
    return say(state, 'There is one circuit only: the tube has nowhere else to go.', 'bad')
  if (more.length === 0) return tubeMoved(state, tube, only)
  const choices = [only, ...more].map((circuit): Choice => {
    const { supply } = wiring.circuits[circuit]!
    const figures = layout.supplies.find(({ id }) => id === supply)
    return { label: `${supply}  ${figures ? supplyShort(figures) : ''}`, value: String(circuit) }
  })
  return choose(state, { for: 'circuit', tube }, `Move ${tube} to the circuit of`, choices)
}

function chooseSupply(state: State): Next {
  const { supplies } = state.present.sign.layout
  return supplies.length === 1
    ? chooseFigure(state, supplies[0]!.id)
    : choose(
        state,
        { for: 'supply' },
        'Supply',
        supplies.map((s) => ({ label: `${s.id}  ${supplyShort(s)}`, value: s.id })),
      )
}

interface FigureKind {
  readonly title: string
  readonly unit: string
  readonly units: UnitScale
  readonly key: 'noLoadVoltage' | 'shortCircuitCurrent' | 'frequency'
}
const figureKinds: Record<SupplyFigure, FigureKind> = {
  no_load_kv: { title: 'No-load voltage, kV rms', unit: 'kV', units: voltageUnits, key: 'noLoadVoltage' },
  short_circuit_ma: {
    title: 'Short-circuit current, mA',
    unit: 'mA',
    units: currentUnits,
    key: 'shortCircuitCurrent',
  },
  frequency_hz: { title: 'Frequency, Hz', unit: 'Hz', units: frequencyUnits, key: 'frequency' },
}

/** without the rounding of the readout: what is not touched must not change */
const figureText = (value: number): string => String(Number(value.toPrecision(9)))

function chooseFigure(state: State, supply: string): Next {
  const s = state.present.sign.layout.supplies.find((one) => one.id === supply)
  if (!s) return say(state, `There is no supply ${supply}.`, 'bad')
  return choose(state, { for: 'supply-figure', supply }, `Figures of ${supply}`, [
    { label: `no-load voltage  ${kvFigure(s.noLoadVoltage)} kV`, value: 'no_load_kv' },
    { label: `short-circuit current  ${maFigure(s.shortCircuitCurrent)} mA`, value: 'short_circuit_ma' },
    { label: `frequency  ${s.frequency} Hz`, value: 'frequency_hz' },
    { label: `type  ${s.type}`, value: 'type' },
    { label: `grounding  ${s.grounding}`, value: 'grounding' },
  ])
}

const types: readonly SupplyType[] = ['electronic', 'core-and-coil']
const groundings: readonly Grounding[] = ['midpoint', 'one-end', 'none']
const plain = (values: readonly string[]): Choice[] => values.map((value) => ({ label: value, value }))

/** What follows when a choice is made. */
export function picked(state: State, pick: PickKind, value: string): Next {
  const after = closed(state)
  switch (pick.for) {
    case 'variant':
      return value === '' ? asFiled(after) : variantChosen(after, value)
    case 'link':
      return feedAt(after, pick.circuit, Number(value))
    case 'supply':
      return chooseFigure(after, value)
    case 'supply-figure':
      return figureChosen(after, pick.supply, value)
    case 'supply-type':
      return figureTyped(after, pick.supply, { type: types.find((t) => t === value) ?? 'electronic' })
    case 'grounding':
      return groundingChosen(after, pick.supply, groundings.find((g) => g === value) ?? 'none')
    case 'circuit':
      return tubeMoved(after, pick.tube, Number(value))
    case 'symptom': {
      const symptom = symptomNamed(value)
      return symptom ? openSymptom(state, symptom) : stay(after)
    }
    case 'fill':
      return fillChosen(after, pick.tube, fills.find((f) => f === value) ?? 'neon')
  }
}

/** Where leads matter, what laying them otherwise gives back is asked for once per sign. */
function openSymptom(state: State, symptom: Symptom): Next {
  const next = open(state, { kind: 'symptom', symptom, scroll: 0 })
  const wanted = aboutLeads(symptom) && !freshSavings(state)
  return wanted ? { ...next, effects: [{ do: 'lay-leads' }] } : next
}

function figureChosen(state: State, supply: string, value: string): Next {
  if (value === 'type')
    return choose(state, { for: 'supply-type', supply }, `Type of ${supply}`, plain(types))
  if (value === 'grounding')
    return choose(state, { for: 'grounding', supply }, `Grounding of ${supply}`, plain(groundings))
  const s = state.present.sign.layout.supplies.find((one) => one.id === supply)
  const figure = (['no_load_kv', 'short_circuit_ma', 'frequency_hz'] as const).find((f) => f === value)
  if (!s || !figure) return stay(state)
  const { title, unit, units, key } = figureKinds[figure]
  return ask(
    state,
    { for: 'supply-figure', supply, figure },
    `${title} of ${supply}`,
    figureText(s[key] / units[unit.toLowerCase()]!),
  )
}

/** What follows when a value is typed: the dialog stays open, with the reason, where it cannot be read. */
export function submitted(state: State, prompt: PromptKind, text: string): Next {
  const after = closed(state)
  switch (prompt.for) {
    case 'filter':
      return filtered(after, text)
    case 'variant-name':
      return variantKept(after, text)
    case 'tube-height':
      return heightSubmitted(state, prompt.tube, text)
    case 'supply-figure':
      return figureSubmitted(state, prompt.supply, prompt.figure, text)
  }
}

function heightSubmitted(state: State, tube: string, text: string): Next {
  const { units, tubes } = state.present.sign.layout
  const height = typedFigure(text, lengthUnits, units)
  if (height === undefined)
    return say(state, `"${text}" is not a height. Type a number, in ${units} or with its unit.`, 'bad')
  if (same(height, tubes.find((t) => t.id === tube)?.height)) return say(closed(state), 'Left as it was.')
  return openWhenRefused(state, heightTyped(closed(state), tube, height))
}

function figureSubmitted(state: State, supply: string, figure: SupplyFigure, text: string): Next {
  const { unit, units, key } = figureKinds[figure]
  const value = typedFigure(text, units, unit)
  if (value === undefined)
    return say(state, `"${text}" is not such a figure. Type a number, in ${unit} or with its unit.`, 'bad')
  const old = state.present.sign.layout.supplies.find((s) => s.id === supply)?.[key]
  if (same(value, old)) return say(closed(state), 'Left as it was.')
  return openWhenRefused(state, figureTyped(closed(state), supply, { [key]: value }))
}

/** to the digits that a prompt shows */
const same = (one: number, other = Number.NaN): boolean => Math.abs(one - other) <= 1e-8 * Math.abs(other)

/** A value out of range keeps its prompt, so that it can be put right. */
const openWhenRefused = ({ dialog }: State, next: Next): Next =>
  next.effects.length > 0 || !dialog ? next : { ...next, state: { ...next.state, dialog } }

function filtered(state: State, text: string): Next {
  const next = onPair({ ...state, filter: text.trim() }, 0)
  const found = next.cursor.on === 'pair' && next.cursor.key !== undefined
  if (text.trim() === '') return stay(next)
  return found
    ? stay(next)
    : say(next, `No pair names "${text.trim()}". / with nothing typed shows all again.`)
}
