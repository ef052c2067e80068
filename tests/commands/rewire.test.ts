/** `tubewright rewire` on the program as it is bundled: streams, exit statuses, the file it writes. */
import { type SpawnSyncReturns, spawnSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test, vi } from 'vitest'
import { parseLayout } from '../../src/layout/parse.js'
import { built } from '../e2e/terminal.js'
import { twoBars } from '../report/signs.js'
import { rowText } from '../rewire/row-text.js'

// a machine that does other things at the same time is slow
vi.setConfig({ testTimeout: 30_000 })

const folder = mkdtempSync(join(tmpdir(), 'tubewright-rewire-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))
const window = readFileSync('layouts/open-window.yaml', 'utf8')
let program = ''
beforeAll(async () => {
  program = await built('src/cli.ts')
  const files: Record<string, string> = {
    'window.yaml': window,
    'dark.yaml': twoBars({ noLoadKv: 1 }),
    'long.yaml': rowText({ tubes: 10, seed: 4 }),
    'bad.yaml': twoBars().replace('fill: neon', 'fill: noen'),
    'hyphens.yaml': twoBars({ id: 'K-b' }),
  }
  for (const [name, text] of Object.entries(files)) writeFileSync(join(folder, name), text)
}, 30_000)

const run = (...args: string[]): SpawnSyncReturns<string> =>
  spawnSync(process.execPath, [program, 'rewire', ...args], {
    cwd: folder,
    encoding: 'utf8',
    timeout: 25_000,
  })
const strings = (text: string) =>
  parseLayout(text, 'x.yaml').layout?.wiring.circuits.map(({ string }) =>
    string.map((e) => (e.reversed ? '-' : '') + e.tube),
  )

describe('rewire', () => {
  test('0 where a wiring has nothing to fix: proposals with their steps on stdout, nothing on stderr', () => {
    const { status, stdout, stderr } = run('window.yaml')
    expect({ status, stderr }).toEqual({ status: 0, stderr: '' })
    expect(stdout).toMatch(/^OPEN, window sign with border \(window\.yaml\)\n/)
    expect(stdout).toContain('All wirings judged (3840): the list begins with the best there is.')
    expect(stdout).toMatch(/\nPROPOSAL 1 {2}0 pairs to fix, worst 0\.83 × its limit, .* 2 jumpers changed\n/)
    expect(stdout).toContain('   1. power off, locked out and discharged; check that it is dead\n')
    expect(stdout).toContain('. take off the jumper border.b–O.a\n')
    expect(stdout).not.toContain('\x1b')
  })

  test('--json: the form of the interface', () => {
    const { status, stdout } = run('window.yaml', '--json')
    expect(status).toBe(0)
    const answer = JSON.parse(stdout)
    expect(answer).toMatchObject({ result: 1, exact: true, method: 'enumeration', judged: 3840 })
    for (const one of answer.proposals) {
      expect(Object.keys(one)).toEqual(
        expect.arrayContaining(['circuits', 'fix', 'worst_severity', 'changed_jumpers', 'lead_mm', 'steps']),
      )
      expect(one.circuits[0]).toMatchObject({ supply: 'S1', lit: true })
      expect([...one.circuits[0].string].map((s: string) => s.replace('-', '')).sort()).toEqual([
        'E',
        'N',
        'O',
        'P',
        'border',
      ])
    }
    expect(answer.proposals[0]).toMatchObject({ fix: 0, changed_jumpers: 2 })
  })

  test('1 where no wiring is lit', () => {
    const { status, stdout } = run('dark.yaml')
    expect(status).toBe(1)
    expect(stdout).toContain('S1 not lit')
    expect(stdout).toContain('No wiring lights this sign')
    expect(JSON.parse(run('dark.yaml', '--json').stdout).proposals).toEqual([])
  })

  test('--keep: what must stay stays, with either dash, one option or several words', () => {
    for (const args of [
      ['--keep', 'border.b-O.a', 'O.b–P.a'],
      ['--keep', 'O.a–border.b', '--keep', 'P.a-O.b'],
    ]) {
      const { proposals } = JSON.parse(run('window.yaml', '--json', ...args).stdout)
      for (const { circuits } of proposals)
        expect(` ${circuits[0].string.join(' ')} `).toMatch(/ border O P | -P -O -border /)
    }
    expect(run('hyphens.yaml', '--keep', 'K-b.b-I.a').status).toBe(0)
  })

  test('--take writes the wiring into a new file, or into the layout itself, and nothing else of it changes', () => {
    const [first] = JSON.parse(run('window.yaml', '--json').stdout).proposals
    const taken = run('window.yaml', '--take', '1', '--out', 'new.yaml')
    expect(taken).toMatchObject({ status: 0, stderr: 'Written: new.yaml\n' })
    const text = readFileSync(join(folder, 'new.yaml'), 'utf8')
    expect(strings(text)).toEqual([first.circuits[0].string])
    const others = (of: string) => of.split('\n').filter((line) => !/^ {4}string:/.test(line))
    expect(others(text)).toEqual(others(window))
    expect(readFileSync(join(folder, 'window.yaml'), 'utf8')).toBe(window)
    writeFileSync(join(folder, 'own.yaml'), window)
    expect(run('own.yaml', '--take', '1', '--out', './own.yaml').status).toBe(0)
    expect(readFileSync(join(folder, 'own.yaml'), 'utf8')).toBe(text)
    // what was taken is the best: there is nothing more to change
    expect(run('own.yaml').stdout).toContain("The file's wiring is the best of them: nothing to change.")
  })

  test('3, and nothing is lost, where the file to write is another one that is there', () => {
    writeFileSync(join(folder, 'there.yaml'), 'mine\n')
    const { status, stderr } = run('window.yaml', '--take', '1', '--out', 'there.yaml')
    expect({ status, stderr }).toEqual({
      status: 3,
      stderr: 'there.yaml: there is a file of this name already; nothing was written\n',
    })
    expect(readFileSync(join(folder, 'there.yaml'), 'utf8')).toBe('mine\n')
  })

  test('--time ends the search, and what was found until then comes out', () => {
    const start = performance.now()
    const { status, stdout } = run('long.yaml', '--time', '1', '--json')
    expect([0, 1]).toContain(status)
    expect(performance.now() - start).toBeLessThan(20_000)
    expect(JSON.parse(stdout)).toMatchObject({ exact: false, stopped: true, method: 'search' })
  })

  test('3 for a layout that cannot be used', () => {
    expect(run('bad.yaml')).toMatchObject({ status: 3, stdout: '' })
    expect(run('none.yaml').stderr).toBe('none.yaml: cannot be read: there is no such file\n')
  })

  test.each([
    [[], 'rewire needs a layout file'],
    [['window.yaml', 'dark.yaml'], 'rewire takes one layout; 2 were named'],
    [
      ['window.yaml', '--keep', 'border.b–X.a'],
      '--keep "border.b–X.a" does not name two ends of this layout',
    ],
    [['window.yaml', '--keep', 'border.b–P.a'], '--keep: the wiring does not join border.b and P.a'],
    [['window.yaml', '--seed', 'x'], '--seed "x" is not a whole number from 0 on'],
    [['window.yaml', '--time', '0'], '--time "0" is not a number of seconds above 0'],
    [['window.yaml', '--take', '1'], '--take K and --out FILE go together'],
    [['window.yaml', '--take', '9', '--out', 'z.yaml'], '--take 9: there '],
  ])('2 for %j, with a word on what is wrong', (args, words) => {
    const { status, stderr } = run(...args)
    expect(status).toBe(2)
    expect(stderr).toContain(`tubewright: ${words}`)
  })
})
