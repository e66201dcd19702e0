/**
 * Projects kept in the browser (IndexedDB), saved after every step, so that a crash loses at most the edit in hand. Each
 * tab writes under a number of its own: two tabs on one project do not overwrite each other.
 */
import type { Desk } from './desk.ts'
import { docText } from './project-file.ts'

export interface Saved {
  readonly id: string
  readonly name: string
  readonly text: string
  readonly steps: number
  /** When, for the list: local time as a short text. */
  readonly at: string
  readonly when: number
}

const database = 'panewise'
const table = 'projects'
/** Older ones are dropped: they are a safety net, not an archive. */
const mostKept = 8

function opened(): Promise<IDBDatabase> {
  return new Promise((resolve, reject) => {
    const request = indexedDB.open(database, 1)
    request.onupgradeneeded = () => request.result.createObjectStore(table, { keyPath: 'id' })
    request.onsuccess = () => resolve(request.result)
    request.onerror = () => reject(request.error ?? new Error('no storage'))
  })
}

function done(transaction: IDBTransaction): Promise<void> {
  return new Promise((resolve, reject) => {
    transaction.oncomplete = () => resolve()
    transaction.onerror = () => reject(transaction.error ?? new Error('not saved'))
    transaction.onabort = () => reject(transaction.error ?? new Error('not saved'))
  })
}

/** Newest first; none where the browser keeps nothing. */
export async function savedProjects(): Promise<readonly Saved[]> {
  try {
    const db = await opened()
    const request = db.transaction(table).objectStore(table).getAll()
    const all = await new Promise<Saved[]>((resolve, reject) => {
      request.onsuccess = () => resolve(request.result as Saved[])
      request.onerror = () => reject(request.error ?? new Error('not read'))
    })
    db.close()
    return all.sort((a, b) => b.when - a.when)
  } catch {
    return []
  }
}

async function save(project: Saved): Promise<void> {
  const db = await opened()
  try {
    const transaction = db.transaction(table, 'readwrite')
    const store = transaction.objectStore(table)
    store.put(project)
    const keys = store.getAll()
    keys.onsuccess = () => {
      for (const old of (keys.result as Saved[]).sort((a, b) => b.when - a.when).slice(mostKept)) store.delete(old.id)
    }
    await done(transaction)
  } finally {
    db.close()
  }
}

/** Saves every step of the desk; says on the sheet when it could not. */
export function keepSaved(desk: Desk): () => void {
  let last: unknown = null
  let id = newId()
  let doc0: unknown = null
  let running: Promise<void> = Promise.resolve()
  return desk.store.subscribe(() => {
    const { steps, at, inHand } = desk.state
    const step = steps[at]
    if (step === undefined || inHand !== null || step === last) return
    last = step
    // Another project gets a number of its own.
    if (steps[0]?.doc.read !== doc0) {
      doc0 = steps[0]?.doc.read
      id = newId()
    }
    const now = new Date()
    const time = `${String(now.getHours()).padStart(2, '0')}:${String(now.getMinutes()).padStart(2, '0')}`
    const project = { id, name: step.doc.name, text: docText(step.doc), steps: at + 1, at: time, when: now.getTime() }
    running = running.then(() => save(project)).then(
      () => desk.set({ saved: `kept ${time}` }),
      () => desk.set({ saved: 'not kept: storage is full or closed; take the project away' }),
    )
  })
}

function newId(): string {
  return `${Date.now().toString(36)}-${Math.random().toString(36).slice(2, 8)}`
}
