/** console.* and process warnings, kept while the screen is in use. */
import { Console } from 'node:console'
import { Writable } from 'node:stream'

export interface KeptMessages {
  /** puts console and warnings back as they were and returns what was said meanwhile */
  release(): string
}

// a program that complains without end must not fill the memory
const limit = 100_000

export function keepMessages(): KeptMessages {
  let text = ''
  let dropped = 0
  const keep = (message: string) => {
    if (text.length + message.length <= limit) text += message
    else dropped++
  }
  const stream = new Writable({
    decodeStrings: false,
    write(message, _encoding, done) {
      keep(String(message))
      done()
    },
  })
  const usualConsole = globalThis.console
  const usualListeners = process.listeners('warning')
  const warned = (warning: Error) => keep(`${warning.name}: ${warning.message}\n`)
  process.removeAllListeners('warning')
  process.on('warning', warned)
  globalThis.console = new Console(stream, stream)

  return {
    release() {
      globalThis.console = usualConsole
      process.off('warning', warned)
      for (const listener of usualListeners) process.on('warning', listener)
      return dropped > 0 ? `${text}(${dropped} more messages)\n` : text
    },
  }
}
