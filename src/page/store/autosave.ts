/**
 * Projects kept in the browser (IndexedDB), saved after every step, so that a crash loses at most the edit in hand. Each
 * tab writes under a number of its own, which it holds by a lock: two tabs on one project do not overwrite each other.
 */
import type { Desk } from './desk.ts'
import { keptText } from './project-file.ts'
import { heldName, type HeldName } from './tabs.ts'

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
      request.onsuccess = () => resolve((request.result as unknown[]).filter(isSaved))
      request.onerror = () => reject(request.error ?? new Error('not read'))
    })
    db.close()
    return all.sort((a, b) => b.when - a.when)
  } catch {
    return []
  }
}

/** What a broken store or another version left is not offered, and not touched. */
function isSaved(record: unknown): record is Saved {
  const { id, name, text, at, steps, when } = (record ?? {}) as Partial<Record<keyof Saved, unknown>>
  return [id, name, text, at].every((value) => typeof value === 'string') && [steps, when].every((value) => typeof value === 'number')
}

async function save(project: Saved): Promise<void> {
  const db = await opened()
  try {
    const transaction = db.transaction(table, 'readwrite')
    const store = transaction.objectStore(table)
    store.put(project)
    const keys = store.getAll()
    keys.onsuccess = () => {
      for (const old of (keys.result as unknown[]).filter(isSaved).sort((a, b) => b.when - a.when).slice(mostKept)) store.delete(old.id)
    }
    await done(transaction)
  } finally {
    db.close()
  }
}

/**
 * Saves every step of the desk; says on the sheet when it could not. A project that was gone on with keeps its number, if no
 * other tab has it.
 */
export function keepSaved(desk: Desk): () => void {
  let last: unknown = null
  let project = { first: null as unknown, id: '' }
  let names: readonly HeldName[] = []
  let running: Promise<void> = Promise.resolve()

  const begun = async (name: string, sha256: string | null, keptAs: string | null): Promise<string> => {
    for (const held of names) held.release()
    const source = sha256 === null ? null : await heldName(`panewise drawing ${name} ${sha256}`)
    const own = keptAs === null ? null : await heldName(`panewise project ${keptAs}`)
    let id = keptAs
    if (id === null || own?.mine !== true) id = newId()
    // The number is taken by this tab before anybody else can see it.
    const fresh = id === keptAs ? null : await heldName(`panewise project ${id}`)
    names = [source, own, fresh].filter((held) => held !== null)
    desk.set({ elsewhere: own?.mine === false ? 'open in another tab too: kept here as a copy of its own' : source?.mine === false ? 'this drawing is open in another tab too: each keeps its own' : '' })
    return id
  }

  return desk.store.subscribe(() => {
    const { steps, at, inHand, keptAs } = desk.state
    const step = steps[at]
    if (step === undefined || inHand !== null || step === last) return
    last = step
    const isNew = steps[0] !== project.first
    const mine = isNew ? { first: steps[0], id: '' } : project
    project = mine
    const now = new Date()
    const time = `${String(now.getHours()).padStart(2, '0')}:${String(now.getMinutes()).padStart(2, '0')}`
    // What is said of a step does not hold for the next one.
    const say = (saved: string): void => {
      if (step === last) desk.set({ saved })
    }
    say('')
    running = running.then(async () => {
      await spareMoment()
      if (isNew) mine.id = await begun(step.doc.name, step.doc.sha256, keptAs)
      await save({ id: mine.id, name: step.doc.name, text: keptText(step.doc), steps: at + 1, at: time, when: now.getTime() })
    }).then(
      () => say(`kept ${time}`),
      (error: unknown) => say(notKept(error)),
    )
  })
}

/** Once the step is drawn and nothing is in hand, half a second later at the latest; a crash before then loses that step. */
function spareMoment(): Promise<void> {
  return new Promise((resolve) => {
    // Not every browser has it.
    if (typeof requestIdleCallback === 'function') requestIdleCallback(() => resolve(), { timeout: 500 })
    else setTimeout(resolve, 50)
  })
}

function notKept(error: unknown): string {
  const isFull = error instanceof DOMException && error.name === 'QuotaExceededError'
  return `not kept: ${isFull ? 'the storage is full' : 'the storage is closed'}; take the project away`
}

function newId(): string {
  return `${Date.now().toString(36)}-${Math.random().toString(36).slice(2, 8)}`
}
