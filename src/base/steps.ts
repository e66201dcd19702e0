/**
 * Work that can be stopped. A long kernel is a generator that yields its progress at least every 50 ms; whoever runs it
 * decides between two yields whether to go on. Kernels compose with `yield*`.
 */

export interface Progress {
  /** What is being done, as a word for the progress bar: "Reading", "Factoring". */
  readonly stage: string
  /** Share of this stage that is done, 0 to 1. */
  readonly done: number
}

export type Steps<T> = Generator<Progress, T, void>

/** Runs to the end without a break: for tests, and for callers that are already off the main thread and need no cancel. */
export function finish<T>(steps: Steps<T>): T {
  for (;;) {
    const step = steps.next()
    if (step.done === true) return step.value
  }
}

export interface DriveOptions {
  readonly signal?: AbortSignal
  readonly onProgress?: (progress: Progress) => void
  /** How long to run before giving other tasks (a cancel message, a key) a turn. */
  readonly sliceMs?: number
}

/** Marks work that was cancelled: `drive` returns it in the place of a value. */
export const cancelled: unique symbol = Symbol('cancelled')

/** Lets other tasks go first: at once where the platform has it, for a timer waits a millisecond and more each time. */
const turnOfOthers: (resume: () => void) => void =
  (globalThis as { setImmediate?: (resume: () => void) => void }).setImmediate ?? ((resume) => setTimeout(resume, 0))

/**
 * Runs the steps, giving the event loop a turn every `sliceMs` (default 40). Returns the value, or `cancelled` once the
 * signal is aborted; the generator is then closed, so that its `finally` blocks run.
 */
export async function drive<T>(steps: Steps<T>, options: DriveOptions = {}): Promise<T | typeof cancelled> {
  const { signal, onProgress, sliceMs = 40 } = options
  let turn = performance.now()
  for (;;) {
    if (signal?.aborted === true) {
      steps.return(undefined as never)
      return cancelled
    }
    const step = steps.next()
    if (step.done === true) return step.value
    onProgress?.(step.value)
    if (performance.now() - turn >= sliceMs) {
      await new Promise<void>(turnOfOthers)
      turn = performance.now()
    }
  }
}
