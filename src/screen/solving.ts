/** Asks the worker thread for solutions: one at a time, and of those that wait only the newest. */
import { Worker } from 'node:worker_threads'
import type { SolveAnswer, SolveJob } from '../solver-worker.js'

export interface Solving {
  request(job: SolveJob): void
  /** answers come here; set before the first answer can arrive */
  onAnswer(listener: (answer: SolveAnswer) => void): void
  close(): void
}

export function solving(): Solving {
  const worker = new Worker(new URL('./solver-worker.js', import.meta.url))
  let busy = false
  let waiting: SolveJob | undefined
  let listener: (answer: SolveAnswer) => void = () => undefined

  function post(job: SolveJob): void {
    busy = true
    worker.postMessage(job)
  }
  worker.on('message', (answer: SolveAnswer) => {
    busy = false
    const next = waiting
    waiting = undefined
    if (next) post(next)
    listener(answer)
  })
  // a fault in there is a fault of the program: it ends here as everywhere, with the message on the normal screen
  worker.on('error', (fault) => {
    throw fault
  })

  return {
    request(job) {
      if (busy) waiting = job
      else post(job)
    },
    onAnswer(to) {
      listener = to
    },
    close() {
      void worker.terminate()
    },
  }
}
