/** The built program: saving, every way out, other terminals, other sizes. */
import { copyFileSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterEach, describe, expect, test, vi } from 'vitest'
import { edit, seen, settled, shippedProgram, solvedScreen, temporary } from './inspector-program.js'
import { closeTerminals, keys, openTerminal, scriptCommand, underShell } from './terminal.js'

const program = shippedProgram()
const folder = temporary()
afterEach(closeTerminals)
// many starts and solutions, on whatever machine
vi.setConfig({ testTimeout: 60_000 })

/** a copy that may be written to */
function copied(name: string): string {
  const path = join(folder, name)
  copyFileSync(`layouts/${name}`, path)
  return path
}
const wide = { columns: 150, rows: 30 }

test('saving changes the wiring of the file and not a byte else, and the file opens with it', async () => {
  const path = copied('feed-moved.yaml')
  const before = readFileSync(path, 'utf8')
  const terminal = underShell(scriptCommand(program, path), wide)
  await settled(terminal)
  await edit(terminal, 'x', 'swapped the two terminals')
  terminal.send('q')
  await terminal.sees('Not saved.')
  terminal.send(keys.escape)
  await terminal.until(() => !terminal.dump().includes('Not saved.'))
  terminal.send('s')
  await terminal.sees('Saved feed-moved.yaml.')
  // what is saved is not asked about
  terminal.send('q')
  expect(await terminal.ending()).toEqual({ status: 0, settingsRestored: true })
  const after = readFileSync(path, 'utf8')
  const [was = [], is = []] = [before, after].map((text) => text.split('\n'))
  expect(is.length).toBe(was.length)
  const changed = was.flatMap((line, i) => (line === is[i] ? [] : [[line.trim(), is[i]?.trim()]]))
  const reversed = (string: string) =>
    string
      .split(', ')
      .reverse()
      .map((entry) => (entry.startsWith('-') ? entry.slice(1) : `-${entry}`))
      .join(', ')
  expect(changed.length).toBe(1)
  const [old = '', now] = changed[0] ?? []
  expect(now).toBe(old.replace(/\[(.*)\]/, (_, string: string) => `[${reversed(string)}]`))

  const again = await solvedScreen(program, path, wide)
  expect(again.lines()[0]).not.toContain('(not saved)')
  // with the terminals swapped back it is the sign that was copied
  await edit(again, 'x', 'swapped the two terminals')
  again.send('s')
  await again.sees('Saved feed-moved.yaml.')
  expect(readFileSync(path, 'utf8')).toBe(before)
})

test('a file that changed meanwhile is overwritten only when told to', async () => {
  const path = copied('script-word.yaml')
  const terminal = await solvedScreen(program, path, wide)
  await edit(terminal, 'x', 'swapped the two terminals')
  const changed = `${readFileSync(path, 'utf8')}# by someone else\n`
  writeFileSync(path, changed)
  terminal.send('s')
  await terminal.sees('The file changed on disk since it was read.')
  terminal.send(`${keys.escape}i`)
  await terminal.sees('now  30°')
  expect(readFileSync(path, 'utf8')).toBe(changed)
  terminal.send('s')
  await terminal.sees('The file changed on disk')
  terminal.send('o')
  await terminal.sees('Saved script-word.yaml.')
  expect(readFileSync(path, 'utf8')).not.toContain('someone else')
})

test('and when that was on the way out, the program ends with the file saved', async () => {
  const path = copied('fascia-border.yaml')
  const terminal = underShell(scriptCommand(program, path), wide)
  await settled(terminal)
  await edit(terminal, 'x', 'swapped the two terminals')
  writeFileSync(path, `${readFileSync(path, 'utf8')}# by someone else\n`)
  terminal.send('q')
  await terminal.sees('Not saved.')
  terminal.send('s')
  await terminal.sees('The file changed on disk')
  terminal.send('o')
  expect(await terminal.ending()).toEqual({ status: 0, settingsRestored: true })
  expect(readFileSync(path, 'utf8')).not.toContain('someone else')
})

describe('the ways out leave the terminal as it was', () => {
  test.each([
    ['q', 'q', 0],
    ['d, with unsaved work', 'xqd', 0],
    ['Ctrl-C, with unsaved work', `x${keys.ctrlC}`, 130],
  ])('%s', async (_name, sent, status) => {
    const terminal = underShell(scriptCommand(program, 'layouts/feed-moved.yaml'), wide)
    // not solved yet: keys are live from the first frame
    await terminal.sees('GO, pennant')
    terminal.send(sent)
    expect(await terminal.ending()).toEqual({ status, settingsRestored: true })
    expect(terminal.alternate()).toBe(false)
    expect(terminal.cursorVisible()).toBe(true)
    expect(terminal.bracketedPaste()).toBe(false)
  })
  test('SIGTERM', async () => {
    // the shell tells its number, then becomes the program
    const command = `sh -c 'echo pid $$; exec ${scriptCommand(program, 'layouts/feed-moved.yaml').replaceAll("'", '"')}'`
    const terminal = underShell(command, wide)
    await terminal.until(() => terminal.dump().includes('GO, pennant'))
    const pid = Number(/pid (\d+)/.exec(terminal.sent())?.[1])
    process.kill(pid, 'SIGTERM')
    expect(await terminal.ending()).toEqual({ status: 143, settingsRestored: true })
    expect(terminal.alternate()).toBe(false)
    expect(terminal.cursorVisible()).toBe(true)
  })
})

test('Ctrl-Z gives the terminal back to the shell, and fg draws everything anew', async () => {
  const command = scriptCommand(program, 'layouts/feed-moved.yaml')
  const script = `set -m; ${command}; echo "stopped=$?"; read go; fg; echo "ended=$?"; read rest`
  const terminal = openTerminal('/bin/sh', ['-c', script], wide)
  await settled(terminal)
  const before = seen(terminal)
  terminal.send(keys.ctrlZ)
  // 128 + SIGTSTP (20 on Linux), as the shell counts a stopped job
  await terminal.sees('stopped=148')
  expect(terminal.alternate()).toBe(false)
  terminal.send('\r')
  await terminal.until(() => seen(terminal) === before)
  expect(terminal.alternate()).toBe(true)
  terminal.send('q')
  await terminal.sees('ended=0')
})

test('a storm of sizes ends with the screen of the last one; below 40x10 there is a plain message', async () => {
  const terminal = await solvedScreen(program, 'layouts/feed-moved.yaml')
  const before = seen(terminal)
  for (let i = 0; i < 40; i++) {
    terminal.resize(38 + ((i * 37) % 90), 8 + ((i * 13) % 30))
    if (i % 5 === 0) terminal.send(keys.tab)
  }
  terminal.resize(39, 9)
  await terminal.sees('tubewright needs 40x10')
  terminal.resize(80, 24)
  // keys typed before the program has heard of the size still fall on the plain message, where only q acts
  await terminal.sees('GO, pennant')
  terminal.send(keys.home)
  await terminal.until(() => seen(terminal) === before, 'never the screen from before')
  expect(terminal.dump()).not.toContain('internal error')
})

const colours = (terminal: Awaited<ReturnType<typeof solvedScreen>>) =>
  new Set(
    terminal
      .cells()
      .flat()
      .flatMap((cell) => [cell.foreground, cell.background])
      .filter((colour) => colour !== undefined),
  )

test('with NO_COLOR nothing has a colour, and the glass is drawn by levels', async () => {
  const terminal = await solvedScreen(program, 'layouts/open-window.yaml', { env: { NO_COLOR: '1' } })
  expect(colours(terminal)).toEqual(new Set())
  expect(terminal.sent()).not.toMatch(/\x1b\[[\d;]*(?:3\d|4\d|9\d|10\d)[;m]/)
  const map = terminal
    .lines()
    .slice(1, 14)
    .map((row) => row.slice(0, 48))
    .join('')
  // levels of both signs
  expect(map).toMatch(/[*#+]{3}/)
  expect(map).toMatch(/[=~-]{3}/)
  // the cursor of a prompt and the choice of a list are seen all the same
  terminal.send('h')
  await terminal.sees('> 40')
  expect(
    terminal
      .cells()
      .slice(1, 4)
      .flat()
      .some((cell) => cell.inverse),
  ).toBe(true)
  terminal.send(`${keys.escape}F`)
  await terminal.sees('> border.b')
  expect(
    terminal
      .cells()
      .slice(1, 6)
      .flat()
      .some((cell) => cell.inverse),
  ).toBe(true)
})

test('TERM=xterm gets the sixteen colours', async () => {
  // the pseudo terminal sets TERM itself
  const command = ['TERM=xterm', 'COLORTERM=', process.execPath, program, 'layouts/open-window.yaml']
  const terminal = openTerminal('/usr/bin/env', command)
  await settled(terminal)
  const used = [...colours(terminal)]
  expect(used.length).toBeGreaterThan(5)
  expect(used.every((colour) => typeof colour === 'number' && colour < 16)).toBe(true)
  expect(terminal.sent()).not.toMatch(/[34]8;[25];/)
})

test('--ascii holds nothing but ASCII on the whole screen, dialogs and messages included', async () => {
  const terminal = await solvedScreen(program, 'layouts/conversion-gone-wrong.yaml', {}, '--ascii')
  const only = (what: string) => expect(terminal.dump(), what).toMatch(/^[\x20-\x7e\n]*$/)
  only('map')
  terminal.send('x')
  await terminal.sees(/^ worst .* > /m)
  only('edit')
  for (const [key, shows] of [
    ['F', 'Move the feed'],
    ['v', 'no variants'],
    ['?', 'Find and probe'],
    ['w', 'Always'],
    ['/', 'Show only'],
  ] as const) {
    terminal.send(key)
    await terminal.sees(shows)
    await terminal.stable(40)
    only(key)
    terminal.send(keys.escape)
    await terminal.sees('f feed other end')
  }
})

test('without a terminal it says so, with status 2', async () => {
  const terminal = underShell(`${scriptCommand(program, 'layouts/feed-moved.yaml')} < /dev/null`, wide)
  expect(await terminal.ending()).toEqual({ status: 2, settingsRestored: true })
  expect(terminal.sent()).toContain('The inspector needs a terminal.')
})
