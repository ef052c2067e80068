/** The built program in a terminal: what it shows, and that no key is lost. */
import { readdirSync, readFileSync } from 'node:fs'
import { afterEach, describe, expect, test, vi } from 'vitest'
import { edit, settled, shippedProgram, solvedScreen } from './inspector-program.js'
import { closeTerminals, keys, scriptCommand, type Terminal, underShell } from './terminal.js'

const program = shippedProgram()
afterEach(closeTerminals)
// many starts and solutions, on whatever machine
vi.setConfig({ testTimeout: 60_000 })

const good = readdirSync('layouts').filter((name) => name.endsWith('.yaml') && name !== 'bad-file.yaml')
const readout = (terminal: Terminal) => terminal.lines().slice(18, 26).join('\n')
/** as much of the layout's title as fits beside the state of the sign */
const titleOf = (name: string) =>
  (/^title: (.*)$/m.exec(readFileSync(`layouts/${name}`, 'utf8'))?.[1] ?? 'no title').slice(0, 36)

describe('the shipped signs at 80x24', () => {
  test.each(good)('%s opens with its title and comes to rest', async (name) => {
    const terminal = await solvedScreen(program, `layouts/${name}`)
    const [title = ''] = terminal.lines()
    expect(title).toMatch(/^ tubewright {2}\S.* LIT now {3}0° *$/)
    expect(title).toContain(titleOf(name))
    expect(terminal.dump()).toMatch(/out \d+\.\d\/\d+\.\d mA/)
    expect(terminal.dump()).not.toContain('internal error')
    expect(terminal.lines()[22]).toMatch(/^ HIGH VOLTAGE KILLS/)
  })
})

test('a file with mistakes is told of on the normal screen, with status 3', async () => {
  const terminal = underShell(scriptCommand(program, 'layouts/bad-file.yaml'), { columns: 120, rows: 60 })
  expect(await terminal.ending()).toEqual({ status: 3, settingsRestored: true })
  expect(terminal.sent()).toContain('layouts/bad-file.yaml:7:8: ')
  expect(terminal.sent()).toMatch(/\d+ problems; the layout is not used/)
  expect(terminal.sent()).not.toContain('\x1b[?1049h')
})

test('a session: walking, editing by every key, prompts, lists and bursts', async () => {
  const terminal = await solvedScreen(program, 'layouts/open-window.yaml', { columns: 150, rows: 30 })

  // walking the list
  const reads = (wanted: RegExp) =>
    terminal.until(() => wanted.test(readout(terminal)), `never read ${wanted}`)
  await reads(/! N at \d+ mm to border at \d+ mm {2}gap 16 mm/)
  terminal.send(keys.tab)
  await reads(/border at .* to border at/)
  terminal.send(keys.shiftTab)
  await reads(/N at \d+ mm to border/)

  // one key feeds the tube from its other end, and says before and after
  expect(await edit(terminal, 'f', 'fed N')).toMatch(/worst \d+\.\d+ → \d+\.\d+ kV rms .* S1 \d+ % → \d+ %/)
  for (const [key, said] of [
    ['u', 'undone: fed N'],
    ['t', 'turned N end for end'],
    ['x', 'swapped the two terminals'],
    ['.', 'N one place later'],
    [',', 'N one place earlier'],
    ['j', 'jumper N.'],
  ] as const)
    expect(await edit(terminal, key, said)).toMatch(/ → /)
  expect(terminal.lines()[0]).toContain('(not saved)')
  await edit(terminal, 'U', "back to the file's wiring")
  expect(terminal.lines()[0]).not.toContain('(not saved)')

  // a pick list: open it, three downs and Enter, all in one write
  terminal.send(`F${keys.down.repeat(3)}\r`)
  await terminal.sees('feed moved to E.b–N.a')
  await edit(terminal, 'u', 'undone: feed moved to E.b–N.a')

  // a typed value and its Enter in one write: the height says 55 in the prompt that follows
  terminal.send(`h${keys.backspace.repeat(2)}55\r`)
  await terminal.sees('N at height 55 mm')
  await settled(terminal)
  terminal.send('h')
  await terminal.sees(/^ ?> 55 /m)
  expect(terminal.dump()).toContain('Height of N, mm')
  terminal.send(keys.escape)
  await terminal.sees('f feed other end')
  await edit(terminal, 'u', 'undone: N at height 55 mm')

  // the filter in a burst, and a paste into it
  const head = () => terminal.lines()[1] ?? ''
  terminal.send('/border\r')
  await terminal.until(() => head().includes('/border'))
  terminal.send(`/${keys.backspace.repeat(6)}`)
  await terminal.sees('Show only pairs')
  terminal.send('\x1b[200~E\r\nN\x1b[201~')
  await terminal.sees('> E N')
  terminal.send('\r')
  await terminal.until(() => head().includes('/E N '))
  terminal.send(keys.escape)
  await terminal.until(() => !head().includes('/'))

  // outside a prompt a paste is no keys, and what comes after it is one
  terminal.send('\x1b[200~fxtqqq\x1b[201~i')
  await terminal.sees('now  30°')
  expect(terminal.lines()[0]).not.toContain('(not saved)')

  // two hundred keys in one write: 201 of twelve steps
  terminal.send('i'.repeat(200))
  await terminal.sees('now 270°')
  terminal.send(keys.tab.repeat(60) + keys.shiftTab.repeat(59))
  await reads(/border at .* to border at/)
  expect(terminal.dump()).not.toContain('internal error')
})

test('v and four Downs in one read pick the fourth variant, behind the wiring of the file', async () => {
  const terminal = await solvedScreen(program, 'layouts/core-and-coil-6kv.yaml', { columns: 150, rows: 30 })
  // four variants kept by one write, each after a swap
  terminal.send(['one', 'two', 'three', 'four'].map((name) => `xV${name}\r`).join(''))
  await terminal.sees('CAFE, 6 kV core-and-coil / two')
  await settled(terminal)
  // one and three are the same wiring, two and four the other
  await edit(terminal, 'x', 'swapped')
  terminal.send(`v${keys.down.repeat(4)}\r`)
  await terminal.sees('variant "four"')
})

test('bytes at 120x40: a cursor step and a wiring edit', async () => {
  const terminal = await solvedScreen(program, 'layouts/reference-12-tubes.yaml', { columns: 120, rows: 40 })
  const bytesOf = async (key: string, done: () => Promise<void>) => {
    terminal.countBytes()
    terminal.send(key)
    await terminal.until(() => terminal.bytes() > 0, 'no answer')
    await done()
    return terminal.bytes()
  }
  const bytesOfAll = async (pressed: readonly string[], done: () => Promise<void>) => {
    const counted: number[] = []
    for (const key of pressed) counted.push(await bytesOf(key, done))
    return counted.sort((a, b) => a - b)
  }
  const drawn = () => terminal.stable(100)
  const solved = async () => {
    await terminal.sees('SOLVING')
    await settled(terminal)
  }
  const first = await bytesOfAll(Array<string>(6).fill(keys.tab), drawn)
  terminal.send(keys.tab.repeat(14))
  await terminal.stable(500)
  // over the end of the list's page
  const steps = [...first, ...(await bytesOfAll(Array<string>(12).fill(keys.tab), drawn))].sort(
    (a, b) => a - b,
  )
  const moves = await bytesOfAll([keys.right, keys.up, keys.left, keys.left, keys.down], drawn)
  await terminal.keys(keys.tab)
  const edits = await bytesOfAll(['f', 't', 'x', 'u'], solved)
  expect(steps.at(-1)).toBeLessThanOrEqual(1500)
  expect(moves.at(-1)).toBeLessThanOrEqual(1500)
  expect(edits.at(-1)).toBeLessThanOrEqual(6000)
})
