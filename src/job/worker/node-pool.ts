/**
 * Several questions at once on the command line: threads of Node, each of which answers one question after the other. The
 * answers are those that one thread would give, byte for byte: a question shares nothing with another.
 */
import { isMainThread, parentPort, Worker } from 'node:worker_threads'
import type { Progress } from '../../base/steps.ts'

export interface Pool<A, T> {
  /** Waits for a free thread. Rejects where the thread failed by a bug, or ran out of memory; the next question gets a new one. */
  ask(question: A, onProgress?: (progress: Progress) => void): Promise<T>
  /** Ends all threads, whatever they are at; questions that wait are answered by a rejection. */
  close(): Promise<void>
}

type FromThread<T> = { readonly kind: 'progress'; readonly progress: Progress } | { readonly kind: 'told'; readonly tell: T } | { readonly kind: 'bug'; readonly message: string }

interface Waiting<A, T> {
  readonly question: A
  readonly settle: (tell: T) => void
  readonly refuse: (error: Error) => void
  readonly onProgress: (progress: Progress) => void
}

/** `script`: the file that a thread runs, which ends by calling `answerInThread`. */
export function nodePool<A, T>(script: URL, threads: number): Pool<A, T> {
  const queue: Waiting<A, T>[] = []
  const idle: Worker[] = []
  const busy = new Map<Worker, Waiting<A, T>>()
  let isClosed = false

  const next = (): void => {
    while (queue.length > 0 && !isClosed) {
      const worker = idle.pop() ?? (busy.size < threads ? started() : undefined)
      if (worker === undefined) return
      const waiting = queue.shift() as Waiting<A, T>
      busy.set(worker, waiting)
      worker.postMessage(waiting.question)
    }
  }
  const started = (): Worker => {
    const worker = new Worker(script)
    worker.on('message', (message: FromThread<T>) => {
      const waiting = busy.get(worker)
      if (message.kind === 'progress') {
        waiting?.onProgress(message.progress)
        return
      }
      busy.delete(worker)
      idle.push(worker)
      if (message.kind === 'told') waiting?.settle(message.tell)
      else waiting?.refuse(new Error(message.message))
      next()
    })
    worker.on('error', (error: Error) => lost(worker, error))
    worker.on('exit', () => lost(worker, new Error('a thread ended')))
    return worker
  }
  const lost = (worker: Worker, error: Error): void => {
    const waiting = busy.get(worker)
    busy.delete(worker)
    const at = idle.indexOf(worker)
    if (at >= 0) idle.splice(at, 1)
    waiting?.refuse(error)
    next()
  }

  return {
    ask: (question, onProgress = () => {}) => new Promise((settle, refuse) => {
      if (isClosed) {
        refuse(new Error('closed'))
        return
      }
      queue.push({ question, settle, refuse, onProgress })
      next()
    }),
    async close() {
      isClosed = true
      for (const waiting of queue.splice(0)) waiting.refuse(new Error('closed'))
      await Promise.all([...idle, ...busy.keys()].map((worker) => worker.terminate()))
    },
  }
}

/** Whether this code runs in a thread of a pool. */
export const isThread = !isMainThread

/** The thread's end: answers every question with `answer`. Progress goes out at most ten times a second. */
export function answerInThread<A, T>(answer: (question: A, onProgress: (progress: Progress) => void) => Promise<T>): void {
  const port = parentPort
  if (port === null) return
  const tell = (message: FromThread<T>): void => port.postMessage(message)
  port.on('message', (question: A) => {
    let last = performance.now()
    const onProgress = (progress: Progress): void => {
      if (performance.now() - last < 100) return
      last = performance.now()
      tell({ kind: 'progress', progress })
    }
    answer(question, onProgress).then((told) => tell({ kind: 'told', tell: told }), (error: unknown) => tell({ kind: 'bug', message: error instanceof Error ? error.message : String(error) }))
  })
}
