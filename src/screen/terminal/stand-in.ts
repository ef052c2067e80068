import type { EventEmitter } from 'node:events'

/**
 * A stream in another's place: everything in `members` answers for it, the rest is the stream's own.
 * Ink asks for whole terminal streams but uses a handful of their members.
 */
export function standIn<Stream extends object>(stream: Stream, members: object): Stream {
  return new Proxy(stream, {
    get: (target, name) => Reflect.get(name in members ? members : target, name),
  })
}

/** The listening members of a stream, served by an emitter of our own. */
export function listening(emitter: EventEmitter): object {
  const on = emitter.on.bind(emitter)
  const off = emitter.off.bind(emitter)
  return { on, addListener: on, once: emitter.once.bind(emitter), off, removeListener: off }
}
