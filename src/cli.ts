#!/usr/bin/env node
/** The command line. Answers go to stdout, complaints to stderr; the exit status says what was found. */
import { checkCommand } from './commands/check.js'
import { complain, status, UsageFault } from './commands/common.js'
import { helpText } from './commands/help.js'
import { netlistCommand } from './commands/netlist.js'
import { openCommand } from './commands/open.js'
import { rewireCommand } from './commands/rewire.js'
import { rulesCommand } from './commands/rules.js'
import { version } from './commands/version.js'

async function main(args: readonly string[]): Promise<number | undefined> {
  // everything behind "--" is a file name, even if it looks like an option
  const options = args.includes('--') ? args.slice(0, args.indexOf('--')) : args
  if (options.includes('--help')) return said(helpText)
  if (options.includes('--version')) return said(`tubewright ${version()}\n`)
  const [command, ...rest] = args
  switch (command) {
    case 'check':
      return checkCommand(rest)
    case 'rewire':
      return rewireCommand(rest)
    case 'netlist':
      return netlistCommand(rest)
    case 'rules':
      return rulesCommand(rest)
    default:
      return openCommand(args)
  }
}

function said(text: string): number {
  process.stdout.write(text)
  return status.fine
}

// a reader that closes early (head, less) is no fault
process.stdout.on('error', (fault: NodeJS.ErrnoException) => {
  process.exit(fault.code === 'EPIPE' ? status.fine : status.internal)
})

try {
  const code = await main(process.argv.slice(2))
  if (code !== undefined) process.exitCode = code
} catch (fault) {
  if (fault instanceof UsageFault) {
    complain(`tubewright: ${fault.message}\nTry: tubewright --help`)
    process.exitCode = status.usage
  } else {
    complain(
      `tubewright: internal error: ${fault instanceof Error ? (fault.stack ?? fault.message) : String(fault)}`,
    )
    process.exitCode = status.internal
  }
}
