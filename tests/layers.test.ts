import { readdirSync, readFileSync } from 'node:fs'
import { join, relative, sep } from 'node:path'
import { expect, it } from 'vitest'

/** A folder imports only from itself and from folders before it; `inspection` is the file that joins the core. */
const order = [
  'math',
  'layout',
  'wiring',
  'geometry',
  'field',
  'network',
  'gaps',
  'rules',
  'prepared',
  'solver',
  'inspection',
  'rewire',
  'view',
  'report',
  'netlist',
  'files',
  'solver-worker',
  'screen',
  'commands',
  'cli',
]

const sources = readdirSync('src', { recursive: true, withFileTypes: true })
  .filter((entry) => entry.isFile())
  .map((entry) => join(entry.parentPath, entry.name))

const layerOf = (path: string): string =>
  (relative('src', path).split(sep)[0] ?? '').replace(/\.(tsx?|js)$/, '')

it('every folder imports only from folders above it', () => {
  const wrong = sources.flatMap((path) => {
    const from = order.indexOf(layerOf(path))
    const imports = [...readFileSync(path, 'utf8').matchAll(/(?:from|import\() ?'(\.[^']+)'/g)]
    return imports
      .map(([, target]) => layerOf(join(path, '..', target ?? '')))
      .filter((to) => order.indexOf(to) < 0 || order.indexOf(to) > from)
      .map((to) => `${path} imports from ${to}`)
  })
  expect(sources.map(layerOf).filter((layer) => !order.includes(layer))).toEqual([])
  expect(wrong).toEqual([])
})

it('only the edges touch the process and the disk', () => {
  const edges = ['files', 'solver-worker', 'screen', 'commands', 'cli']
  const wrong = sources.filter(
    (path) => !edges.includes(layerOf(path)) && /from 'node:|process\./.test(readFileSync(path, 'utf8')),
  )
  expect(wrong).toEqual([])
})
