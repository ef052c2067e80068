/** Prompts, pick lists, sheets and questions. */
import { describe, expect, test } from 'vitest'
import { findingInView } from '../../src/screen/aim.js'
import type { Action } from '../../src/screen/keys.js'
import { sheetPage } from '../../src/screen/panes/sheets.js'
import { selectedPair } from '../../src/screen/state.js'
import { currentUnits, lengthUnits, typedFigure, voltageUnits } from '../../src/screen/typed.js'
import { type Session, session, solution } from './session.js'

const supplyOf = (s: Session) => s.state().present.sign.layout.supplies[0]
const heightOf = (s: Session, tube: string) =>
  s.state().present.sign.layout.tubes.find(({ id }) => id === tube)?.height
const promptOf = (s: Session) => {
  const { dialog } = s.state()
  return dialog?.kind === 'prompt' ? dialog : undefined
}

describe('typed figures', () => {
  test.each([
    ['55', 0.055],
    ['55.5', 0.0555],
    [' 55,5 ', 0.0555],
    ['55mm', 0.055],
    ['5.5 cm', 0.055],
    ['2 in', 0.0508],
    ['2"', 0.0508],
    ['0,055 M', 0.055],
    ['-20', -0.02],
    ['5.5e1', 0.055],
    ['.5', 0.0005],
  ])('%s is a length in a layout in mm', (text, metres) => {
    expect(typedFigure(text, lengthUnits, 'mm')).toBeCloseTo(metres, 12)
  })
  test('without a unit a length counts in the unit of the layout', () => {
    expect(typedFigure('2', lengthUnits, 'in')).toBeCloseTo(0.0508, 12)
  })
  test('volts and kilovolts, amperes and milliamperes', () => {
    expect(typedFigure('7500 V', voltageUnits, 'kV')).toBe(7500)
    expect(typedFigure('7.5', voltageUnits, 'kV')).toBe(7500)
    expect(typedFigure('30mA', currentUnits, 'mA')).toBeCloseTo(0.03, 12)
  })
  test.each([
    '',
    ' ',
    'tall',
    '5 5',
    '1.2.3',
    '1,000,5',
    '5 kV',
    'NaN',
    'Infinity',
    '1e999',
    '--5',
    '0x10',
    'mm',
  ])('"%s" is no length', (text) => expect(typedFigure(text, lengthUnits, 'mm')).toBeUndefined())
})

describe('the height of a tube', () => {
  test.each([
    ['55', 0.055],
    ['62,5', 0.0625],
    ['3 in', 0.0762],
  ])('%s typed lifts the tube there', (text, metres) => {
    const s = session('open-window', { slow: true })
    s.keys('h')
    s.type(text)
    expect(s.state().dialog).toBeUndefined()
    expect(heightOf(s, 'N')).toBeCloseTo(metres, 12)
    expect(heightOf(s, 'P')).toBe(0.04)
    expect(s.state().solving).toBe(true)
  })

  test.each(['', 'tall', '5 kV', '90000'])(
    '"%s" keeps the prompt open, says why, and changes nothing',
    (text) => {
      const s = session('open-window')
      const before = s.state().present
      s.keys('h')
      s.type(text)
      expect(promptOf(s)?.text).toBe(text)
      expect(s.state().message?.level).toBe('bad')
      expect(s.state().present).toBe(before)
      s.keys('escape')
      expect(s.state().dialog).toBeUndefined()
      expect(s.state().present).toBe(before)
    },
  )

  test('Enter on what the prompt shows changes nothing, not even by rounding', () => {
    const s = session('open-window', { slow: true })
    s.keys('h')
    s.type('41.23456')
    s.answer()
    const before = s.state().present
    s.keys('h')
    expect(promptOf(s)?.text).toBe('41.23456')
    s.type('41.23456')
    expect(s.state().present).toBe(before)
    expect(s.state().message?.text).toBe('Left as it was.')
  })
})

describe("the supply's figures", () => {
  const asking = (figure: string) => {
    const s = session('open-window', { slow: true })
    s.keys('e')
    s.send({ type: 'picked', value: figure })
    return s
  }
  test.each([
    ['no_load_kv', '6.5', '5,5', { noLoadVoltage: 5500 }],
    ['no_load_kv', '6.5', '9000 V', { noLoadVoltage: 9000 }],
    ['short_circuit_ma', '30', '18', { shortCircuitCurrent: expect.closeTo(0.018, 9) }],
    ['frequency_hz', '22000', '30 kHz', { frequency: 30_000 }],
  ])('%s shows %s and takes %s', (figure, shown, typed, wanted) => {
    const s = asking(figure)
    expect(promptOf(s)?.text).toBe(shown)
    s.type(typed)
    expect(supplyOf(s)).toMatchObject(wanted)
    expect(s.state().present.said).toMatch(/^S1: /)
  })
  test.each([
    ['no_load_kv', '80', 'No-load voltage must be 0.1 to 30 kV.'],
    ['no_load_kv', '-5', 'No-load voltage must be 0.1 to 30 kV.'],
    ['short_circuit_ma', '0', 'Short-circuit current must be 1 to 1000 mA.'],
    ['frequency_hz', '1', 'Frequency must be 10 to 200000 Hz.'],
    ['frequency_hz', 'fast', '"fast" is not such a figure. Type a number, in Hz or with its unit.'],
  ])('%s: %s keeps the prompt open: %s', (figure, typed, says) => {
    const s = asking(figure)
    const before = supplyOf(s)
    s.type(typed)
    expect(promptOf(s)?.text).toBe(typed)
    expect(s.state().message).toEqual({ text: says, level: 'bad' })
    expect(supplyOf(s)).toBe(before)
  })
  test('type and grounding are picked', () => {
    const s = asking('type')
    s.send({ type: 'picked', value: 'core-and-coil' })
    expect(supplyOf(s)?.type).toBe('core-and-coil')
    s.keys('e')
    s.send({ type: 'picked', value: 'grounding' })
    s.send({ type: 'picked', value: 'one-end' })
    expect(supplyOf(s)?.grounding).toBe('one-end')
  })
  test('with two supplies it is asked which', () => {
    const s = session('reference-12-tubes', { slow: true })
    s.keys('e')
    expect(s.state().dialog).toMatchObject({ kind: 'pick', title: 'Supply' })
    const { dialog } = s.state()
    const second = dialog?.kind === 'pick' ? dialog.choices[1]?.value : undefined
    s.send({ type: 'picked', value: second ?? '' })
    expect(s.state().dialog).toMatchObject({ title: `Figures of ${second}` })
  })
})

describe('variants', () => {
  test('picking one puts its wiring on the screen', () => {
    const s = session('open-window')
    s.keys('v')
    s.send({ type: 'picked', value: 'fed between P and E' })
    const [variant] = s.state().opened.sign.layout.variants
    expect(s.state().present.sign.wiring.circuits).toBe(variant?.circuits)
    s.keys('v')
    s.send({ type: 'picked', value: 'fed between P and E' })
    expect(s.state().message?.text).toBe('"fed between P and E" is on the screen already.')
  })
  test('a file without any says how to keep one', () => {
    const s = session('core-and-coil-6kv')
    s.keys('v')
    expect(s.state().dialog).toBeUndefined()
    expect(s.state().message?.text).toMatch(/keeps no variants yet\. V keeps/)
  })
  test('keeping the wiring under a name adds it, and can be undone', () => {
    const s = session('open-window')
    s.keys('f', 'V')
    s.type('  fed at the N ')
    const { layout, wiring } = s.state().present.sign
    expect(layout.variants.map(({ name }) => name)).toEqual(['fed between P and E', 'fed at the N'])
    expect(layout.variants[1]?.circuits).toBe(wiring.circuits)
    s.keys('u')
    expect(s.state().present.sign.layout.variants.length).toBe(1)
  })
  test('a name that is there already is kept anew, without a name nothing is kept', () => {
    const s = session('open-window')
    s.keys('x', 'V')
    s.type('fed between P and E')
    const { layout, wiring } = s.state().present.sign
    expect(layout.variants.map((v) => v.circuits)).toEqual([wiring.circuits])
    s.keys('V')
    s.type('  ')
    expect(s.state().message).toEqual({ text: 'A variant needs a name.', level: 'bad' })
  })
})

test('a text is taken up to a length that can be drawn', () => {
  const s = session('open-window')
  s.keys('V')
  s.send({ type: 'typed', text: 'x'.repeat(5000) })
  expect(promptOf(s)?.text).toBe('x'.repeat(200))
})

test('a window that becomes too small closes a prompt, but not the question before leaving', () => {
  const s = session('open-window')
  s.keys('x', 'h')
  s.send({ type: 'resized', columns: 30, rows: 8 })
  expect(s.state().dialog).toBeUndefined()
  s.keys('q')
  s.send({ type: 'resized', columns: 31, rows: 8 })
  expect(s.state().dialog).toEqual({ kind: 'quit' })
})

test('the fill is picked, and the same fill is refused in words', () => {
  const s = session('open-window', { slow: true })
  s.keys('l')
  s.send({ type: 'picked', value: 'argon-mercury' })
  expect(s.state().present.sign.layout.tubes.find(({ id }) => id === 'N')?.fill).toBe('argon-mercury')
  s.keys('l')
  s.send({ type: 'picked', value: 'argon-mercury' })
  expect(s.state().message?.text).toBe('Nothing to change: N is filled with argon-mercury already.')
})

describe('leaving', () => {
  const edited = () => {
    const s = session('open-window')
    s.keys('f', 'q')
    expect(s.state().dialog).toEqual({ kind: 'quit' })
    expect(s.effects()).toEqual([])
    return s
  }
  test('s saves and quits', () => {
    const s = edited()
    s.keys('s')
    expect(s.effects()).toEqual([{ do: 'save', force: false, thenQuit: true }])
  })
  test('d quits without saving', () => {
    const s = edited()
    s.keys('d')
    expect(s.effects()).toEqual([{ do: 'quit' }])
  })
  test('any other key is no answer, Esc stays', () => {
    const s = edited()
    s.keys('x', 'q', 'enter', 'y', ' ')
    expect(s.state().dialog).toEqual({ kind: 'quit' })
    s.keys('escape')
    expect(s.state().dialog).toBeUndefined()
    expect(s.effects()).toEqual([])
  })
  test('Ctrl-Z suspends wherever one is', () => {
    for (const before of [[], ['h'], ['v'], ['?'], ['f', 'q']]) {
      const s = session('open-window')
      s.keys(...before, 'ctrl-z')
      expect(s.effects()).toEqual([{ do: 'suspend' }])
    }
  })
})

describe('saving', () => {
  test('what was saved is what undo comes back to', () => {
    const s = session('open-window')
    s.keys('f', 's')
    const { opened, present } = s.state()
    s.effects()
    s.send({ type: 'saved', opened: { ...opened, sign: present.sign }, thenQuit: false })
    expect(s.state().message).toEqual({ text: 'Saved open-window.yaml.', level: 'good' })
    s.keys('q')
    expect(s.effects()).toEqual([{ do: 'quit' }])
    // the wiring before the save is now an edit
    s.keys('u', 'q')
    expect(s.state().dialog).toEqual({ kind: 'quit' })
  })
  test('a file that changed on disk is overwritten only when asked to', () => {
    const s = session('open-window')
    s.keys('f', 's')
    s.effects()
    const refused = { type: 'not-saved', why: 'changed', changedOnDisk: true, thenQuit: false } as const
    s.send(refused)
    s.keys('q', 's', 'enter')
    expect(s.effects()).toEqual([])
    s.keys('o')
    expect(s.effects()).toEqual([{ do: 'save', force: true, thenQuit: false }])
    s.send(refused)
    s.keys('escape')
    expect(s.effects()).toEqual([])
    expect(s.state().dialog).toBeUndefined()
  })
  test('on the way out a file that changed is asked about, and when it is overwritten the program ends', () => {
    const s = session('open-window')
    s.keys('f', 'q', 's')
    expect(s.effects()).toEqual([{ do: 'save', force: false, thenQuit: true }])
    s.send({ type: 'not-saved', why: 'changed', changedOnDisk: true, thenQuit: true })
    expect(s.effects()).toEqual([])
    s.keys('o')
    expect(s.effects()).toEqual([{ do: 'save', force: true, thenQuit: true }])
    const { opened, present } = s.state()
    s.send({ type: 'saved', opened: { ...opened, sign: present.sign }, thenQuit: true })
    expect(s.effects()).toEqual([{ do: 'quit' }])
  })
  test('when it cannot be saved on the way out the work stays on the screen', () => {
    const s = session('open-window')
    s.keys('f', 'q', 's')
    s.effects()
    s.send({ type: 'not-saved', why: 'Not saved: the disk is full.', changedOnDisk: false, thenQuit: true })
    expect(s.effects()).toEqual([])
    expect(s.state().dialog).toBeUndefined()
    // a later save is no way out any more
    s.keys('s')
    expect(s.effects()).toEqual([{ do: 'save', force: false, thenQuit: false }])
  })
  test('why a file could not be written is said', () => {
    const s = session('open-window')
    s.keys('f', 's')
    s.send({ type: 'not-saved', why: 'Not saved: the disk is full.', changedOnDisk: false, thenQuit: false })
    expect(s.state().message).toEqual({ text: 'Not saved: the disk is full.', level: 'bad' })
  })
})

describe.each<[Action, string]>([
  ['help', '?'],
  ['cautions', 'w'],
  ['why', 'y'],
])('the sheet of %s', (_action, key) => {
  test('scrolls to its last line and no further', () => {
    const s = session('conversion-gone-wrong')
    const text = () =>
      sheetPage(s.state()).map((spans) =>
        spans
          .map((one) => one.text)
          .join('')
          .trimEnd(),
      )
    s.keys(key)
    const first = text()
    expect(first.at(-1)).toMatch(/more lines: Down, PgDn/)
    s.keys(...Array<string>(100).fill('pagedown'))
    const last = text()
    expect(last).not.toEqual(first)
    expect(last.join('\n')).not.toContain('more lines')
    s.keys('up')
    expect(text().join('\n')).not.toEqual(last.join('\n'))
    s.keys(...Array<string>(100).fill('pageup'))
    expect(text()).toEqual(first)
    s.keys('x')
    expect(s.state().dialog).toBeUndefined()
    // the key that closed it did nothing else
    expect(s.state().past).toEqual([])
  })
})

const sheetText = (s: Session): string =>
  sheetPage(s.state())
    .map((spans) =>
      spans
        .map(({ text }) => text)
        .join('')
        .trimEnd(),
    )
    .join('\n')

describe('why', () => {
  // tall enough for the whole text
  const tall = { columns: 100, rows: 120 }
  test('derives the pair the cursor is on', () => {
    const s = session('open-window', tall)
    s.keys('tab', 'y')
    const { pair } = selectedPair(s.state()) ?? {}
    expect(sheetText(s)).toContain(`Why ${pair?.a.part} at `)
    expect(sheetText(s)).toMatch(/S1\.1 stands at \d\.\d\d kV to ground/)
    expect(sheetText(s)).toContain('Verdict')
  })
  test('derives what is between mark and cursor', () => {
    const s = session('open-window', tall)
    s.keys('tab', 'm')
    // from the place that is marked to what the cursor walks onto
    for (let i = 0; i < 40 && !findingInView(s.state()); i++) s.keys('right')
    const probe = findingInView(s.state())
    expect(probe?.key).toBe('probe')
    s.keys('y')
    expect(sheetText(s)).toContain(`Why ${probe?.a.part} at `)
  })
  test('says where to go when there is no pair', () => {
    const s = session('open-window')
    s.keys('left')
    s.keys(...Array<string>(30).fill('shift-up'), 'y')
    expect(findingInView(s.state())).toBeUndefined()
    expect(s.state().dialog).toBeUndefined()
    expect(s.state().message?.text).toMatch(/^No pair here/)
  })
  test('goes by the condition on the screen', () => {
    const s = session('open-window', tall)
    s.keys('c', 'y')
    expect(sheetText(s)).toContain('the condition asked for is nameplate')
  })
  test('nothing but ASCII where that is asked for', () => {
    const s = session('open-window', { ...tall, ascii: true })
    s.keys('y')
    expect(sheetText(s)).toMatch(/^[\x20-\x7e\n]+$/)
    expect(sheetText(s)).not.toContain('?')
  })
})

describe('by symptom', () => {
  const tall = { columns: 100, rows: 120 }
  test('the choice opens its sheet; any other key closes it', () => {
    const s = session('open-window', tall)
    s.keys('Y')
    s.send({ type: 'picked', value: 'ozone' })
    expect(sheetText(s)).toContain('Symptom: ozone')
    expect(s.effects()).toEqual([])
    s.keys('x')
    expect(s.state().dialog).toBeUndefined()
  })
  test('where leads matter, laying them otherwise is asked for once, and told when it is known', () => {
    const s = session('open-window', tall)
    s.keys('Y')
    s.send({ type: 'picked', value: 'tripping' })
    expect(s.effects()).toEqual([{ do: 'lay-leads' }])
    expect(sheetText(s)).not.toContain('cut to the straight')
    const saving = {
      circuit: 0,
      between: ['N.b', 'S1.2'] as const,
      cut: { length: 0.322, stray: 0.0006, least: 0.0001, residual: 0 },
    }
    const { revision } = s.state()
    s.send({ type: 'solved', revision, solved: solution(s.state()), savings: [saving] })
    expect(sheetText(s)).toContain('N.b–S1.2 cut to the straight 322 mm: it eats less by 0.6 mA')
    s.keys('escape', 'Y')
    s.send({ type: 'picked', value: 'dim-far-tube' })
    expect(s.effects()).toEqual([])
    expect(sheetText(s)).toContain('cut to the straight')
    // another wiring, other leads
    s.keys('escape', 'f', 'Y')
    s.send({ type: 'picked', value: 'tripping' })
    expect(sheetText(s)).not.toContain('cut to the straight')
    expect(s.effects()).toEqual([{ do: 'lay-leads' }])
  })
})
