/** A broken invariant of our own code: a bug, never a user's mistake. */
export class Bug extends Error {
  override readonly name = 'Bug'
}

/** Throws a Bug when `condition` is false; `what` says which invariant broke. */
export function assert(condition: boolean, what: string): asserts condition {
  if (!condition) throw new Bug(what)
}

/** For the end of a switch over a union: a compile error while a case is missing. */
export function never(value: never): never {
  throw new Bug(`unexpected ${String(value)}`)
}
