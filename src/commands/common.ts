/** What the commands share: exit statuses, reading arguments, and files named on the command line. */
import { type ParseArgsConfig, parseArgs } from 'node:util'

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
