/** `tubewright LAYOUT`: the inspector. Ink is loaded only here, and only once the layout can be used. */
import { existsSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { readLayoutFile } from '../files.js'
import { solving } from '../screen/solving.js'
import { backgroundOf } from '../screen/terminal/background.js'
import { type ColourFlag, chalkLevel, colourLevel } from '../screen/terminal/colour-level.js'
import { airOf, argumentsOf, complain, oneOf, status, UsageFault } from './common.js'

/** opened where no layout is named */
const exampleName = 'open-window.yaml'

export async function openCommand(args: readonly string[]): Promise<number | undefined> {
  const { values, positionals } = argumentsOf({
    args: [...args],
    allowPositionals: true,
    options: {
      color: { type: 'string' },
      ground: { type: 'string' },
      ascii: { type: 'boolean' },
      air: { type: 'string' },
      measure: { type: 'boolean' },
    },
  })
  if (positionals.length > 1) throw new UsageFault(`one layout at a time; ${positionals.length} were named`)
  const flag = oneOf<ColourFlag>('--color', values.color ?? 'auto', [
    'auto',
    'always',
    'never',
    '16',
    '256',
    '24bit',
  ])
  const ground =
    values.ground === undefined ? undefined : oneOf('--ground', values.ground, ['dark', 'light'] as const)
  const air = airOf(values.air)
  const path = positionals[0] ?? examplePath()
  const read = readLayoutFile(path)
  if (!read.ok) {
    complain(read.complaint)
    return status.unusable
  }
  if (!process.stdin.isTTY || !process.stdout.isTTY) {
    complain('The inspector needs a terminal. For a pipe or a script: tubewright check LAYOUT')
    return status.usage
  }
  // the worker begins with the capacitances while the screen is still being loaded
  const worker = solving()
  const level = colourLevel(process.env, flag, process.stdout)
  // raw from here on: the terminal's answer about its ground must not be echoed
  process.stdin.setRawMode(true)
  const [{ runInspector }, { default: chalk }, asked] = await Promise.all([
    import('../screen/run.js'),
    import('chalk'),
    ground ?? backgroundOf(process.stdin, process.stdout, process.env),
  ])
  // the widgets show their cursor by inverse, which chalk knows from level 1 on; no colour is asked of it
  chalk.level = chalkLevel(level) || 1
  runInspector(
    read.file,
    {
      theme: { level, ground: asked ?? 'dark' },
      ascii: values.ascii ?? false,
      air,
      measure: values.measure ?? false,
    },
    worker,
  )
  return undefined
}

/** The example that is shipped: beside the bundle's folder, and in the tree of the sources. */
function examplePath(): string {
  const path = fileURLToPath(new URL(`../layouts/${exampleName}`, import.meta.url))
  if (!existsSync(path)) throw new UsageFault('name a layout file')
  return path
}
