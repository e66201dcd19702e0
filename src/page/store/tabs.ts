/** Names that one tab of this browser holds at a time, by Web Locks: a tab that is closed or killed lets go of them. */

export interface HeldName {
  /** Whether this tab holds it; null: the browser cannot tell. */
  readonly mine: boolean | null
  release(): void
}

export function heldName(name: string): Promise<HeldName> {
  const unknown: HeldName = { mine: null, release: () => {} }
  const { locks } = navigator as { locks?: LockManager }
  // Pages that are not served securely have no locks.
  if (locks === undefined) return Promise.resolve(unknown)
  return new Promise((resolve) => {
    locks.request(name, { ifAvailable: true }, (lock) => {
      if (lock === null) {
        resolve({ mine: false, release: () => {} })
        return undefined
      }
      return new Promise<void>((release) => resolve({ mine: true, release }))
    }).catch(() => resolve(unknown))
  })
}
