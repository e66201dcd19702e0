/**
 * The page's end of the worker. A question that another of its kind overtakes is cancelled and answered with null; after a
 * bug, or when a cancel is not heard in time, the worker is thrown away and a new one started.
 */
import type { Progress } from '../../base/steps.ts'
import type { FromWorker, Kind, Questions, ToWorker } from './protocol.ts'

/** What the client needs of a Worker: so that tests can put another end there. */
export interface Port {
  postMessage(message: ToWorker): void
  onmessage: ((event: { data: FromWorker }) => void) | null
  onerror: ((event: unknown) => void) | null
  terminate(): void
}

/** A cancel that is not heard within this time ends the worker: kernels yield every 50 ms, so it hangs. */
const patience = 3000

/** Long questions about the answer before: a new one makes them void. */
const aboutTheLast: readonly Kind[] = ['releases', 'cures', 'oneWay']

interface Waiting {
  readonly kind: Kind
  readonly settle: (tell: unknown) => void
  readonly refuse: (error: Error) => void
  readonly onProgress: (progress: Progress) => void
  cancelled: boolean
}

export class WorkerClient {
  private readonly start: () => Port
  private port: Port | null = null
  private readonly waiting = new Map<number, Waiting>()
  private next = 1
  /** Grows with every worker started: what an older one knew is gone. */
  generation = 0

  constructor(start: () => Port) {
    this.start = start
  }

  /** Asks; null when it was cancelled or overtaken. `alone`: cancels earlier questions of this kind; an answer also those about the answer before. */
  ask<K extends Kind>(kind: K, ask: Questions[K]['ask'], alone: boolean, onProgress: (progress: Progress) => void = () => {}): Promise<Questions[K]['tell'] | null> {
    if (alone) for (const [id, question] of this.waiting) if (question.kind === kind || (kind === 'answer' && aboutTheLast.includes(question.kind))) this.cancel(id)
    const id = this.next
    this.next += 1
    return new Promise((resolve, reject) => {
      const settle = (tell: unknown): void => resolve(tell as Questions[K]['tell'] | null)
      this.waiting.set(id, { kind, settle, refuse: reject, onProgress, cancelled: false })
      this.worker().postMessage({ id, kind, ask } as ToWorker)
    })
  }

  /** Cancels whatever is being asked. */
  stop(): void {
    for (const id of [...this.waiting.keys()]) this.cancel(id)
  }

  close(): void {
    this.port?.terminate()
    this.port = null
  }

  private cancel(id: number): void {
    const question = this.waiting.get(id)
    if (question === undefined || question.cancelled) return
    question.cancelled = true
    question.settle(null)
    const port = this.port
    port?.postMessage({ kind: 'cancel', id })
    setTimeout(() => {
      if (this.waiting.has(id) && this.port === port) this.replace(null)
    }, patience)
  }

  private worker(): Port {
    if (this.port !== null) return this.port
    const port = this.start()
    this.port = port
    this.generation += 1
    port.onmessage = ({ data }) => this.heard(data)
    port.onerror = () => this.replace(new Error('the worker failed'))
    return port
  }

  private heard(message: FromWorker): void {
    const question = this.waiting.get(message.id)
    if (question === undefined) return
    if (message.kind === 'progress') {
      if (!question.cancelled) question.onProgress(message.progress)
      return
    }
    this.waiting.delete(message.id)
    if (message.kind === 'bug') {
      question.refuse(new Error(message.message))
      this.replace(null)
    } else if (!question.cancelled) question.settle(isCancelled(message.tell) ? null : message.tell)
  }

  private replace(error: Error | null): void {
    this.port?.terminate()
    this.port = null
    const waiting = [...this.waiting.values()]
    this.waiting.clear()
    for (const question of waiting) {
      if (question.cancelled || error === null) question.settle(null)
      else question.refuse(error)
    }
  }
}

function isCancelled(tell: unknown): boolean {
  const result = tell as { ok?: unknown; problem?: { code?: unknown } } | null
  return result !== null && typeof result === 'object' && result.ok === false && result.problem?.code === 'cancelled'
}
