/** Ctrl-Z and its way back. */
export interface JobControl {
  suspend(): void
  /** gives the signals back to the system */
  release(): void
}

/** `hide` puts the terminal into its normal state before the stop, `show` takes it again afterwards. */
export function jobControl(hide: () => void, show: () => void): JobControl {
  let suspended = false
  let timer: NodeJS.Timeout | undefined

  function suspend(): void {
    if (suspended) return
    suspended = true
    hide()
    // without our listener the signal stops the process, and with it the whole job as Ctrl-Z does
    process.off('SIGTSTP', suspend)
    process.kill(0, 'SIGTSTP')
    // where no shell could ever continue the job the system does not stop it, and no SIGCONT comes
    timer = setTimeout(resume, 100)
  }

  function resume(): void {
    clearTimeout(timer)
    if (suspended) process.on('SIGTSTP', suspend)
    suspended = false
    show()
  }

  process.on('SIGTSTP', suspend)
  process.on('SIGCONT', resume)
  return {
    suspend,
    release() {
      clearTimeout(timer)
      process.off('SIGTSTP', suspend)
      process.off('SIGCONT', resume)
    },
  }
}
