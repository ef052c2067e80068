/** When to draw: together with everything of the same turn, and no more often than the interval says. */
export interface FramePace {
  /** something has to be drawn */
  request(): void
  /** the next request is drawn at once, but these too keep the interval among themselves */
  hurry(): void
  stop(): void
}

export function framePace(intervalMs: number, draw: () => void): FramePace {
  let last = Number.NEGATIVE_INFINITY
  let lastHurried = Number.NEGATIVE_INFINITY
  let hurried = false
  let cancel: (() => void) | undefined
  // time at which the planned drawing is due, ms
  let due = Number.POSITIVE_INFINITY
  let stopped = false

  function run(): void {
    last = performance.now()
    if (hurried) lastHurried = last
    hurried = false
    clear()
    draw()
  }

  function clear(): void {
    cancel?.()
    cancel = undefined
    due = Number.POSITIVE_INFINITY
  }

  function request(): void {
    const now = performance.now()
    const earliest = Math.max(now, (hurried ? lastHurried : last) + intervalMs)
    if (stopped || earliest >= due) return
    clear()
    due = earliest
    if (earliest > now) {
      const timer = setTimeout(run, Math.ceil(earliest - now))
      cancel = () => clearTimeout(timer)
    } else {
      const immediate = setImmediate(run)
      cancel = () => clearImmediate(immediate)
    }
  }

  return {
    request,
    hurry() {
      hurried = true
    },
    stop() {
      stopped = true
      clear()
    },
  }
}
