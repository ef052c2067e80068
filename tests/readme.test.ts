import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { parseLayout } from '../src/layout/parse.js'
import { keyTable, keyTableText } from '../src/screen/keys.js'

const readme = readFileSync('README.md', 'utf8')

describe('the README', () => {
  it('prints the one table of keys', () => {
    expect(readme).toContain(keyTableText())
  })

  it('shows a layout that the program accepts', () => {
    const example = /```yaml\n([\s\S]*?)```/.exec(readme)?.[1] ?? ''
    expect(parseLayout(example, 'README.md').problems).toEqual([])
  })
})

describe('the table of keys', () => {
  it('gives every key one meaning', () => {
    const keys = keyTable.flatMap((entry) => entry.keys)
    expect(new Set(keys).size).toBe(keys.length)
  })

  it('gives every action one row', () => {
    const actions = keyTable.map((entry) => entry.action)
    expect(new Set(actions).size).toBe(actions.length)
  })
})
