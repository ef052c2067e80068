/** Bursts, as a held key or a slow link makes them, lose nothing – neither in a reducer nor in Ink's widgets. */
import { setTimeout as sleep } from 'node:timers/promises'
import { render, Text } from 'ink'
import SelectInput from 'ink-select-input'
import TextInput from 'ink-text-input'
import { createElement, type ReactElement, useState } from 'react'
import { afterEach, describe, expect, test, vi } from 'vitest'
import { frameSink } from '../../../src/screen/terminal/frame-sink.js'
import { type KeyHandlers, keyPump } from '../../../src/screen/terminal/key-pump.js'
import { fakeInput, fakeOutput } from './fake-streams.js'

const down = '\x1b[B'
const ends: (() => void)[] = []
afterEach(() => {
  for (const end of ends.splice(0)) end()
})

function started(app: ReactElement | undefined, handlers: KeyHandlers = {}) {
  const input = fakeInput()
  const pump = keyPump(input.stream, handlers)
  const sink = frameSink(fakeOutput(40, 12).stream)
  if (app) {
    const options = { stdout: sink.stream, stdin: pump.stream, debug: true, patchConsole: false }
    ends.push(render(app, { ...options, exitOnCtrlC: false }).unmount)
  }
  pump.start()
  ends.push(pump.stop, sink.close)
  return { pump, type: input.type }
}

/** A prompt whose every drawing takes a while, as that of a full screen does. */
function Prompt({ submitted }: { readonly submitted: (text: string) => void }) {
  const [text, setText] = useState('')
  const until = performance.now() + 8
  while (performance.now() < until);
  return createElement(TextInput, { value: text, onChange: setText, onSubmit: submitted })
}

describe('ink-text-input', () => {
  async function prompt() {
    const submitted = vi.fn()
    const { type } = started(createElement(Prompt, { submitted }))
    await sleep(20)
    return { type, submits: (text: string) => vi.waitFor(() => expect(submitted).toHaveBeenCalledWith(text)) }
  }

  test('text and Enter in one read are submitted', async () => {
    const { type, submits } = await prompt()
    type('hello\r')
    await submits('hello')
  })

  test('a paste among keys in one read arrives as one line', async () => {
    const { type, submits } = await prompt()
    type('<\x1b[200~one\r\ntwo\x1b[201~>\r')
    await submits('<one two>')
  })

  test('keys 0 to 2 ms apart arrive all and in order', async () => {
    const { type, submits } = await prompt()
    const text = 'the quick brown fox jumps'
    for (const [i, letter] of [...text].entries()) {
      type(letter)
      await sleep(i % 3)
    }
    type('\r')
    await submits(text)
  })

  test('reports of the terminal, unknown sequences and split ones leave no text', async () => {
    const { type, submits } = await prompt()
    for (const read of [
      'a\x1b]11;rgb:0/0/0\x07',
      'b\x1b[?62c',
      '\x1b[57;1u',
      'x\x1b',
      '[D\x1b[',
      '3~\x7f',
      '\r',
    ])
      type(read)
    // x is typed, Left steps back over it, Delete takes (as Ink's prompt does) what is before the cursor, so b; Backspace takes a
    await submits('x')
  })
})

describe('ink-select-input', () => {
  const items = Array.from({ length: 9 }, (_, i) => ({ label: `${i}`, value: i }))

  test.each([
    ['in one read', (type: (text: string) => void) => type(`${down.repeat(3)}\r`)],
    ['in one read each', (type: (text: string) => void) => [down, down, down, '\r'].forEach(type)],
    ['byte by byte', (type: (text: string) => void) => [...`${down.repeat(3)}\r`].forEach(type)],
  ])('three Downs %s move three', async (_how, burst) => {
    const selected = vi.fn()
    const list = createElement(SelectInput<number>, { items, onSelect: ({ value }) => selected(value) })
    const { type } = started(list)
    await sleep(20)
    burst(type)
    await vi.waitFor(() => expect(selected).toHaveBeenCalledWith(3))
  })
})

/** Shows a count and hands out what adds one to the count of this very drawing. */
function Counter({ counted }: { readonly counted: (count: number, next: () => void) => void }) {
  const [count, setCount] = useState(0)
  counted(count, () => setCount(count + 1))
  return createElement(Text, null, String(count))
}

interface Prompting {
  readonly opener: (open: () => void, isOpen: boolean) => void
  readonly submitted: (text: string) => void
}

/** Shows a prompt from `open` until Enter. */
function Opening({ opener, submitted }: Prompting) {
  const [isOpen, setOpen] = useState(false)
  const [text, setText] = useState('')
  opener(() => setOpen(true), isOpen)
  const onSubmit = (said: string) => {
    submitted(said)
    setOpen(false)
  }
  if (isOpen) return createElement(TextInput, { value: text, onChange: setText, onSubmit })
  return createElement(Text, null, 'keys')
}

describe('a reducer', () => {
  test('sees each of 200 keys of one write after the last one is drawn', async () => {
    let press = () => {}
    const drawn: number[] = []
    const counted = (count: number, next: () => void) => {
      drawn.push(count)
      press = next
    }
    const { type, pump } = started(createElement(Counter, { counted }), {
      onKey: () => {
        press()
        return true
      },
    })
    type('j'.repeat(200))
    expect(pump.waiting()).toBe(199)
    await vi.waitFor(() => expect(drawn.at(-1)).toBe(200))
    expect(drawn).toEqual(Array.from({ length: 201 }, (_, i) => i))
  })

  test('takes keys until a prompt has the focus, in the order typed', async () => {
    const submitted = vi.fn()
    const taken: string[] = []
    let prompting = false
    let open = () => {}
    const opener = (opens: () => void, isOpen: boolean) => {
      open = opens
      prompting = isOpen
    }
    const { type } = started(createElement(Opening, { opener, submitted }), {
      onKey: (name) => {
        if (prompting) return false
        taken.push(name)
        if (name === '/') open()
        return true
      },
    })
    type('jk/jam\rq')
    await vi.waitFor(() => expect(taken).toEqual(['j', 'k', '/', 'q']))
    expect(submitted.mock.calls).toEqual([['jam']])
  })

  function recorded() {
    const seen: string[] = []
    const { type, pump } = started(undefined, {
      onKey: (name) => seen.push(name) > 0,
      onPaste: (text) => seen.push(`paste ${text}`) > 0,
    })
    return { seen, type, pump }
  }

  test('gets a paste as one event', async () => {
    const { seen, type } = recorded()
    type('a\x1b[200~j\nq\x1b[201~b')
    await vi.waitFor(() => expect(seen).toEqual(['a', 'paste j\nq', 'b']))
  })

  test('gets a split sequence whole, and Escape when nothing follows within 40 ms', async () => {
    const { seen, type } = recorded()
    type('\x1b')
    await sleep(15)
    type('[A')
    type('\x1b')
    await sleep(80)
    type('j')
    await vi.waitFor(() => expect(seen).toEqual(['up', 'escape', 'j']))
  })

  test('hears of Ctrl-C before keys that were typed earlier and still wait', async () => {
    const { seen, type } = recorded()
    type(`${'j'.repeat(100)}\x03k`)
    await vi.waitFor(() => expect(seen.at(-1)).toBe('k'))
    expect(seen).toEqual(['ctrl-c', 'k'])
  })

  test('hears nothing after the pump was stopped', async () => {
    const { seen, type, pump } = recorded()
    type('jj')
    pump.stop()
    type('k')
    await sleep(10)
    expect(seen).toEqual(['j'])
  })
})
