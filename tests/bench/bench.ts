/**
 * `npm run bench`: every figure that has a goal, and what it is made of. It never fails. Times depend on the machine
 * and on what else it does (the load is printed); bytes and ratios hardly do.
 *
 *   npm run bench                    everything
 *   npm run bench -- quick           without the memory over 10,000 keys
 *   npm run bench -- edits keys      these parts only: launch edits keys plain rewire memory
 */
import { execFileSync } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { cpus, loadavg, tmpdir } from 'node:os'
import { join } from 'node:path'
import { editRows, fileRows } from './core-rows.js'
import { ratioRows } from './ratio-rows.js'
import { rewireRows } from './rewire-rows.js'
import { screenRows } from './screen-rows.js'
import { type BenchSign, benchSign } from './sign.js'
import { heading, row } from './table.js'
import { bytesRows, launchRows, memoryRows } from './terminal-rows.js'

const reference = 'layouts/reference-12-tubes.yaml'
const parts = ['launch', 'edits', 'keys', 'plain', 'rewire', 'memory'] as const
const named = parts.filter((name) => process.argv.includes(name))
const everything = process.argv.includes('quick') ? parts.filter((name) => name !== 'memory') : parts
const wanted: readonly string[] = named.length > 0 ? named : everything

/** The program as `npm run build` makes it, in a folder of its own. */
function built(directory: string): string {
  execFileSync('npm', ['run', '--silent', 'build', '--', `--outdir=${directory}`], { stdio: 'inherit' })
  return join(directory, 'tubewright.js')
}

/** A part that breaks is said to be broken, and the others go on. */
async function part(name: (typeof parts)[number], title: string, rows: () => Promise<void> | void) {
  if (!wanted.includes(name)) return
  heading(title)
  try {
    await rows()
  } catch (fault) {
    row('not measured', String(fault).split('\n')[0] ?? '')
  }
}

async function signParts(program: string, sign: BenchSign): Promise<void> {
  const { tubes, title, supplies } = sign.layout
  const name = `${title} (${tubes.length} tubes, ${supplies.length} supplies)`
  await part('launch', `${name}: launch`, () => launchRows(program, sign))
  await part('edits', `${name}: file and edits`, () => editRows(sign, fileRows(sign)))
  await part('keys', `${name}: keys`, async () => {
    screenRows(sign)
    await bytesRows(program, sign)
  })
  await part('plain', `${name}: against the plain way`, () => ratioRows(sign))
}

const start = performance.now()
const directory = mkdtempSync(join(tmpdir(), 'tubewright-bench-'))
try {
  const program = built(directory)
  const [load = 0] = loadavg()
  const processor = `${cpus().length} × ${cpus()[0]?.model ?? 'unknown'}`
  console.log(`node ${process.version}, ${processor}, load ${load.toFixed(1)} before the start`)
  const sign = benchSign(reference)
  await signParts(program, sign)
  await signParts(program, benchSign('layouts/open-window.yaml'))
  await part('rewire', 'rewire: rows of invented tubes', rewireRows)
  await part('memory', `${sign.layout.title}: memory`, () => memoryRows(program, sign))
} finally {
  rmSync(directory, { recursive: true, force: true })
}
console.log(`\n${((performance.now() - start) / 1000).toFixed(0)} s`)
// pseudo terminals that were closed keep the process alive for a while
process.exit(0)
