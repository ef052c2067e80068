/** The text of `check`, as it stands in a job file. */
import { readFileSync } from 'node:fs'
import stringWidth from 'string-width'
import { expect, test, vi } from 'vitest'
import { inspection, prepare, solver } from '../../src/inspection.js'
import { parseLayout } from '../../src/layout/parse.js'
import { checkSummary } from '../../src/report/check-summary.js'
import { checkText } from '../../src/report/check-text.js'
import type { Condition } from '../../src/rules/findings.js'
import { twoBars } from './signs.js'

// a machine that does other things at the same time is slow
vi.setConfig({ testTimeout: 30_000 })

function checked(text: string, { all = false, condition = 'lit' as Condition, file = 'sign.yaml' } = {}) {
  const { layout, problems } = parseLayout(text, 'sign.yaml')
  expect(problems).toEqual([])
  if (!layout) throw new Error('no layout')
  const prepared = prepare(layout)
  const found = inspection(prepared, layout.wiring, solver(prepared)(layout.wiring), condition)
  return { found, text: checkText(file, layout, found, { all, condition }) }
}
const tooLong = (text: string): string[] => text.split('\n').filter((line) => stringWidth(line) > 100)

// the figures are those of the column law: see check-json.test.ts
test('two bars 3 mm apart', () => {
  expect(checked(twoBars({ gap: 3 })).text).toBe(`Two bars (sign.yaml)
Condition lit. Rules: common-practice. Air: cautious reading.
kV and mA are rms unless marked peak. Clean, dry, new glass.
HIGH VOLTAGE KILLS AND STARTS FIRES. Off, locked out and discharged before touching; licensed person
and local code decide.

SUPPLY S1  core-and-coil, 6.0 kV no-load, 30.0 mA short-circuit, 60 Hz, midpoint grounded
  string  K I   (- = entered at end b)
  lit  S1.1 0.78 kV 29.0 mA   S1.2 0.78 kV 29.0 mA
  glass 1.60 m, 2 electrode pairs, 45 W in the glass
  stray 10 µA, residual to ground 0 µA, dimmest K with 29.0 mA
  needs 1.6 kV:  26 % of the no-load 6.0 kV
  mains input about 53 W:  30 % of the rated 180 W
  residual 0 µA:   0 % of the trip value 15.0 mA

  tube  length  kV a  kV b  drop kV  mA a  mA b  least mA  stray mA  nameplate a/b
  K     0.80 m  0.78  0.00     0.78  29.0  29.0      29.0       0.0     3.0 / 0.00
  I     0.80 m  0.00  0.78     0.78  29.0  29.0      29.0       0.0    0.00 / -3.0

  lead      role    length    kV  stray mA  to ground  to parts  route
  S1.1–K.a  feed     89 mm  0.78       0.0        0.0       0.0  drawn
  K.b–I.a   jumper  121 mm  0.00       0.0        0.0       0.0  drawn
  I.b–S1.2  feed    148 mm  0.78       0.0        0.0       0.0  drawn

PAIRS  1 to fix, 0 to watch, 5 within common-practice
             from           to             gap mm    kV   low–high  paper  needs     x  by
  1  fix     K @0.0         I @800            3.0   1.6    1.1–2.0    6.0     17  5.68  a
  2  within  I.b–S1.2 @0.0  K @0.0            5.5   1.6    1.1–2.0    6.0         0.33  b
  3  within  S1.1–K.a @89   I @800            5.5   1.6    1.1–2.0    6.0         0.33  b
  4  within  S1.1–K.a @89   I.b–S1.2 @0.0     8.0   1.6    1.1–2.0    6.0         0.22  b
  5  within  K.b–I.a @0.0   I @0.0            5.5  0.00  0.00–0.00   0.00         0.00  b
  6  within  K.b–I.a @93    K @800             20  0.00  0.00–0.00   0.00         0.00  b
  a = common-practice: thumb
  b = physics: discharge in the air
  kV: lit, with its band; paper: nameplate, shared out; x: difference over what the gap may have

LEADS
  - S1 gives 29.0 mA; what each lead eats of it sideways:
  - S1.1–K.a, feed, 89 mm: eats 0 µA (0 %); stands at 1.1 kV peak, 4.2 kV peak at no load.
  - K.b–I.a, jumper, 121 mm: eats 0 µA (0 %); stands at 0.00 kV peak, 0.00 kV peak at no load.
  - I.b–S1.2, feed, 148 mm: eats 1 µA (0 %); stands at 1.1 kV peak, 4.2 kV peak at no load.
  - With a tube open any lead of S1 may stand at 4.2 kV peak to ground: the rating of its insulation
    must exceed that.
  - S1 gets 0 µA back through ground: 0 % of the 15.0 mA that trips it.

CAUTIONS
  - fix: K @0.0 to I @800: gap 3.0 mm at 1.6 kV rms, needs 17 mm by common-practice: thumb.
  - The voltages here kill. Switch off, lock out and discharge before touching glass, leads or
    metal; one slip is enough.
  - Sparks and creeping discharges start fires: keep combustible material away from leads and
    electrodes.
  - Bond and ground all metal of the sign, frames and boxes included.
  - Do not measure kilovolts with ordinary meters or probes; measure only what an instrument rated
    for it can take.
  - The figures are a model of clean, dry, new glass; they do not replace an inspection. A licensed
    person and the local code decide.
`)
})

test('a rule set that could not be read is not one that pairs are within', () => {
  const { text } = checked(twoBars().replace('[common-practice]', '[common-practice, no-such-set]'))
  expect(text).toContain('within common-practice\n')
  expect(text).not.toMatch(/(within|Rules:) .*no-such-set/)
  // it is a caution instead
  expect(text).toMatch(/Rule set missing.*no-such-set/)
})

test('the no-load voltage is the one that counts: by its peak where that is greater', () => {
  // IEC 61347-2-10:2000: the greater of rms and peak/√2; 9.9/√2 = 7.0
  const { text } = checked(twoBars().replace('no_load_kv: 6', 'no_load_kv: 6\n    no_load_peak_kv: 9.9'))
  expect(text).toContain('core-and-coil, 7.0 kV no-load')
  expect(text).not.toMatch(/6\.0 kV/)
})

test('no line is longer than 100 columns, with the names of the shipped signs', () => {
  const folder = new URL('../../layouts/', import.meta.url)
  const names = ['feed-moved', 'script-word', 'core-and-coil-6kv', 'reference-12-tubes'].map(
    (n) => `${n}.yaml`,
  )
  for (const name of names) {
    const { text } = checked(readFileSync(new URL(name, folder), 'utf8'), {
      all: true,
      file: `layouts/${name}`,
    })
    expect(tooLong(text), name).toEqual([])
    expect(text).not.toMatch(/NaN|undefined|Infinity/)
  }
})

test.each([
  ['lit', {}],
  ['not lit', { noLoadKv: 1 }],
])('nor with long ones, in a long folder, where it is %s', (_, figures) => {
  const id = 'lower-left-corner-of-the-window'
  const { text, found } = checked(twoBars({ gap: 3, id, ...figures }), {
    all: true,
    file: `${'folder/'.repeat(20)}sign.yaml`,
  })
  expect(tooLong(text)).toEqual([])
  // what tells names apart is at their ends
  expect(text).toContain('lower-left')
  const line = checkSummary([
    { file: `${'folder/'.repeat(20)}sign.yaml`, toFix: true, inspection: found },
    { file: 'none.yaml', toFix: true },
  ])
  expect(tooLong(line)).toEqual([])
  expect(line).toMatch(/\n {2}fix {7}folder.*….*sign\.yaml {2}1 pair to fix/)
  expect(line).toMatch(/\n {2}unusable {2}none\.yaml\n$/)
})

test('a sign that is not lit shows no lit figures, and says on what its pairs are judged', () => {
  const { text } = checked(twoBars({ noLoadKv: 1 }))
  expect(text).toContain('  NOT LIT  dark: K, I\n')
  expect(text).toMatch(/\n {2}K {5}0\.80 m +0\.50 \/ 0\.00\n/)
  expect(text).toMatch(/K @0\.0 +I @800 +60 +nameplate +1\.0 +\d\.\d\d {2}a\n/)
})

test('--all lists every pair, without it the worst and the first few within', () => {
  const rows = (text: string) => text.match(/^ +\d+ +(fix|watch|within)\??/gm)?.length
  const open = readFileSync(new URL('../../layouts/open-window.yaml', import.meta.url), 'utf8')
  const { found, text } = checked(open, { all: true })
  expect(rows(text)).toBe(found.pairs.length)
  const urgent = found.pairs.filter((pair) => pair.verdict !== 'within').length
  expect(found.pairs.length).toBeGreaterThan(urgent + 5)
  expect(rows(checked(open).text)).toBe(urgent + 5)
})

test('condition broken has a column with the worst break and its tube', () => {
  const { text } = checked(twoBars({ gap: 3 }), { condition: 'broken' })
  expect(text).toContain('Condition broken.')
  expect(text).toMatch(/ {2}1 +fix +K @\S+ +I @\S+ +3\.0 .* 6\.0 K /)
  expect(text).toContain(
    '  broken: the worst with a tube open (one of each circuit, or half circuit, there), and which\n',
  )
  expect(tooLong(text)).toEqual([])
  // where it decides nothing it takes no room
  expect(checked(twoBars({ gap: 3 })).text).not.toContain('broken')
})

test('what was measured, in one line', () => {
  const { text } = checked(twoBars().replace('    leads:', '    measured: {primary_w: 50}\n    leads:'))
  expect(text).toMatch(
    / {2}measured 50 W at the plug, computed 5\d W: the law is scaled by 0\.\d\d, band ±5 %\n/,
  )
})
