import { writeSync } from 'node:fs'

/** Writes at once, whatever state the stream is in; gives up silently when nobody can read it any more. */
export function writeNow(fd: number, text: string): void {
  const bytes = Buffer.from(text)
  const deadline = performance.now() + 1000
  for (let written = 0; written < bytes.length; ) {
    try {
      written += writeSync(fd, bytes, written)
    } catch (error) {
      // a full pipe or a slow terminal takes the rest a little later
      if (!isBusy(error) || performance.now() > deadline) return
      Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, 5)
    }
  }
}

const isBusy = (error: unknown): boolean =>
  error instanceof Error && 'code' in error && error.code === 'EAGAIN'
