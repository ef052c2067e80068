/** What the commands share: exit statuses, complaints, and reading arguments. */
import { type ParseArgsConfig, parseArgs } from 'node:util'
import type { StartMode } from '../gaps/air.js'

/** Exit statuses; a signal ends with 128 + its number. */
export const status = { fine: 0, somethingToFix: 1, usage: 2, unusable: 3, internal: 70 } as const

export const complain = (text: string): void => {
  process.stderr.write(text.endsWith('\n') ? text : `${text}\n`)
}

/** Wrong usage: said with the command's own usage line. */
export class UsageFault extends Error {}

/** `parseArgs` of node with its complaints as usage faults. */
export function argumentsOf<T extends ParseArgsConfig>(config: T): ReturnType<typeof parseArgs<T>> {
  try {
    return parseArgs(config)
  } catch (fault) {
    throw new UsageFault(fault instanceof Error ? fault.message : String(fault))
  }
}

/** One of the words that an option knows. */
export function oneOf<T extends string>(option: string, text: string, known: readonly T[]): T {
  const found = known.find((word) => word === text)
  if (found === undefined) throw new UsageFault(`${option} ${text}: expected ${known.join(', ')}`)
  return found
}

/** `--air`: what starts of discharges go by; cautious unless said. */
export const airOf = (text = 'cautious'): StartMode =>
  oneOf('--air', text, ['clean', 'cautious'] as const) === 'clean' ? 'best' : 'cautious'
