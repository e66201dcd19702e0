/** The worker's end: runs one question at a time, in order, and hears cancels in between. */
import { fail, ok } from '../../base/result.ts'
import type { DriveOptions } from '../../base/steps.ts'
import { read } from '../run.ts'
import { Session } from '../session.ts'
import type { FromWorker, ToWorker } from './protocol.ts'

interface Scope {
  onmessage: ((event: { data: ToWorker }) => void) | null
  postMessage(message: FromWorker): void
}

const scope = globalThis as unknown as Scope
const stops = new Map<number, AbortController>()
let session: { plan: number; session: Session; rehearsed: boolean } | null = null
let queue: Promise<void> = Promise.resolve()
/** Stops the rehearsal that runs, or the wait for it. */
let rehearsal = new AbortController()

scope.onmessage = ({ data }) => {
  rehearsal.abort()
  if (data.kind === 'cancel') {
    stops.get(data.id)?.abort()
    return
  }
  const stop = new AbortController()
  stops.set(data.id, stop)
  queue = queue.then(async () => {
    try {
      const tell = stop.signal.aborted ? fail('cancelled', 'stopped before it began') : await told(data, stop.signal)
      scope.postMessage({ kind: 'told', id: data.id, tell })
    } catch (error) {
      scope.postMessage({ kind: 'bug', id: data.id, message: error instanceof Error ? `${error.message}` : String(error) })
    } finally {
      stops.delete(data.id)
    }
  })
}

/** Questions of a drag asked for nothing in the quiet after the first answer: the first drag of a session took four times as long. */
const rehearsedTimes = 4
const quietBefore_ms = 300
/** Above this many panels a rehearsal holds the worker's memory longer than it helps. */
const mostRehearsed = 12_000

function rehearseSoon(on: NonNullable<typeof session>): void {
  const { signal } = (rehearsal = new AbortController())
  setTimeout(() => {
    if (signal.aborted) return
    queue = queue.then(async () => {
      await on.session.rehearse(rehearsedTimes, { signal, sliceMs: 10 })
      on.rehearsed = !signal.aborted
    }).catch(() => {})
  }, quietBefore_ms)
}

/** Progress at most ten times a second: each message costs the page a turn. */
const progressEvery = 100

async function told(question: Exclude<ToWorker, { kind: 'cancel' }>, signal: AbortSignal): Promise<unknown> {
  let last = performance.now()
  const drive: DriveOptions = {
    signal,
    sliceMs: 20,
    onProgress: (progress) => {
      if (performance.now() - last < progressEvery) return
      last = performance.now()
      scope.postMessage({ kind: 'progress', id: question.id, progress })
    },
  }
  switch (question.kind) {
    case 'read': return read(question.ask, drive)
    case 'base':
      session = { plan: question.ask.plan, session: new Session(question.ask.read, question.ask.name), rehearsed: question.ask.read.plan.panelCount > mostRehearsed }
      return ok(null)
    default: {
      if (session === null || session.plan !== question.ask.plan) return fail('no-plan', 'the worker has no such plan')
      const { session: held } = session
      if (question.kind === 'ways') return held.ways(question.ask.count)
      if (question.kind === 'frozen') return held.whyFrozen(question.ask.joint)
      if (question.kind === 'releases') return held.releases(drive)
      if (question.kind === 'cures') return held.cures(drive)
      if (question.kind === 'applied') return held.applied(question.ask.cure)
      if (question.kind === 'oneWay') return held.oneWay(question.ask.joints, drive)
      if (question.kind === 'balance') return held.balanced(question.ask.brief, question.ask.densities, drive)
      if (question.kind === 'mirrors') return ok(held.mirrors())
      if (question.kind === 'surface') return held.surface(question.ask.file, drive)
      if (question.kind === 'files') return held.files(question.ask.csv, drive)
      const { brief, options, target } = question.ask
      const made = await held.answer(brief, options, target, drive)
      if (made.ok && !session.rehearsed) rehearseSoon(session)
      // The page has the plan: a copy of it with every answer would cost it a third of the message.
      return made.ok ? ok({ ...made.value.answer, plan: undefined }) : made
    }
  }
}
