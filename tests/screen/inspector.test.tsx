/** The Ink side: panes where they belong, dialogs over the map, and a window that is too small. */
import { render } from 'ink'
import { cleanup, render as renderForTest } from 'ink-testing-library'
import { afterEach, expect, test, vi } from 'vitest'
import { frame } from '../../src/screen/frame.js'
import { Inspector, type Store } from '../../src/screen/inspector.js'
import { standIn } from '../../src/screen/terminal/stand-in.js'
import { textWidth } from '../../src/view/text-width.js'
import { paneText } from './pane-lines.js'
import { type Session, session } from './session.js'

afterEach(cleanup)

const theme = { level: 0, ground: 'dark' } as const

function storeOf(s: Session): Store {
  const listeners = new Set<() => void>()
  return {
    subscribe(listener) {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    state: s.state,
    dispatch(event) {
      s.send(event)
      for (const listener of listeners) listener()
    },
  }
}

const plain = (text: string) => text.replace(/\x1b\[[?\d;]*[A-Za-z]/g, '')

/** one frame at any size: the testing library knows 100 columns only */
function drawn(s: Session): string[] {
  let last = ''
  const { columns, rows } = s.state()
  const stdout = standIn(process.stdout, {
    columns,
    rows,
    isTTY: true,
    write: (text: string) => {
      // what is not a frame is a cursor command
      if (plain(text).trim() !== '') last = plain(text)
      return true
    },
    on: () => undefined,
    off: () => undefined,
  })
  const stdin = standIn(process.stdin, {
    ...Object.fromEntries(
      ['ref', 'unref', 'setEncoding', 'setRawMode', 'resume', 'pause'].map((name) => [name, () => undefined]),
    ),
    isTTY: true,
    read: () => null,
    on: () => undefined,
    off: () => undefined,
    addListener: () => undefined,
    removeListener: () => undefined,
  })
  const app = render(<Inspector store={storeOf(s)} theme={theme} />, {
    stdout,
    stdin,
    debug: true,
    patchConsole: false,
    exitOnCtrlC: false,
  })
  app.unmount()
  return last.split('\n')
}

test('renders every pane in its place, and follows the store', async () => {
  const s = session('open-window', { columns: 100, rows: 30 })
  const store = storeOf(s)
  const { lastFrame } = renderForTest(<Inspector store={store} theme={theme} />)
  const rows = () => plain(lastFrame() ?? '').split('\n')
  await vi.waitFor(() => expect(rows().length).toBe(30))
  const boxes = frame(100, 30)
  const part = ({ x, y, width, height }: (typeof boxes)['map']) =>
    rows()
      .slice(y, y + height)
      .map((row) => row.slice(x, x + width).trimEnd())
  for (const name of [
    'title',
    'worst',
    'loading',
    'legend',
    'readout',
    'message',
    'footer',
    'banners',
  ] as const) {
    const wanted = paneText(s.state(), name)
    expect(part(boxes[name]).slice(0, wanted.length), name).toEqual(wanted)
  }
  // the map is the sink's: Ink leaves its room empty
  expect(part(boxes.map).join('')).toBe('')
  store.dispatch({ type: 'key', key: 'c' })
  await vi.waitFor(() => expect(rows()[0]).toContain('NAMEPLATE'))
})

test.each([
  [40, 10],
  [60, 20],
  [80, 24],
  [120, 40],
  [250, 70],
])(
  'at %ix%i every dialog leaves as many rows as the screen has, none too wide, the banners last',
  (columns, rows) => {
    for (const keys of [[], ['/'], ['h'], ['v'], ['F'], ['e'], ['?'], ['w'], ['f', 'q']]) {
      const s = session('open-window', { columns, rows })
      s.keys(...keys)
      const lines = drawn(s)
      expect(lines.length, keys.join()).toBe(rows)
      for (const line of lines) expect(textWidth(line)).toBeLessThanOrEqual(columns)
      const text = lines.map((line) => line.trimEnd())
      expect(text.slice(-2)).toEqual(paneText(s.state(), 'banners'))
      expect(text[0]).toBe(paneText(s.state(), 'title')[0])
    }
  },
)

test('a prompt shows its title and text, a pick list its choices with the first one pointed at', () => {
  const s = session('open-window')
  s.keys('h')
  expect(
    drawn(s)
      .slice(1, 3)
      .map((line) => line.slice(0, 40).trimEnd()),
  ).toEqual(['Height of N, mm', '> 40'])
  s.keys('escape', 'F')
  expect(
    drawn(s)
      .slice(1, 6)
      .map((line) => line.slice(0, 40).trimEnd()),
  ).toEqual(['Move the feed to the jumper', '> border.b–O.a', '  O.b–P.a', '  P.b–E.a', '  E.b–N.a'])
})

test.each([['h'], ['F'], ['e'], ['v'], ['?'], ['w'], ['/']])(
  'with pure ASCII %s holds nothing else',
  (key) => {
    const s = session('open-window', { ascii: true })
    s.keys(key)
    expect(drawn(s).join('\n')).toMatch(/^[\x20-\x7e\n]*$/)
  },
)

test('a window below 40x10 gets a plain message, and the question before leaving with unsaved work', () => {
  for (const [columns, rows] of [
    [39, 24],
    [80, 9],
    [20, 5],
    [12, 3],
  ] as const) {
    const s = session('open-window')
    s.keys('x')
    s.send({ type: 'resized', columns, rows })
    const said = () => drawn(s).join(' ').replace(/\s+/g, ' ')
    expect(said()).toContain('tubewright needs 40x10')
    const before = s.state()
    s.keys('f', 'h', '?', 'u', 'i', 'tab')
    expect(s.state()).toBe(before)
    s.keys('q')
    expect(said()).toContain('Not saved.')
    for (const line of drawn(s)) expect(textWidth(line)).toBeLessThanOrEqual(columns)
  }
})
