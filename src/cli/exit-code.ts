/** Exit codes: the verdict in a number, for scripts. */
import type { Verdict } from '../roof/answer/answer.ts'

export type ExitCode = 0 | 1 | 2 | 3 | 130

const ofVerdict: Readonly<Record<Verdict, ExitCode>> = {
  lifts: 0,
  'lifts in part': 3,
  'lifts within plan tolerance': 3,
  'lifts within tolerance': 3,
  'does not lift': 1,
}

export const exitCodeOf = (verdict: Verdict): ExitCode => ofVerdict[verdict]

/** Bad input, bad use, an open question. */
export const badUse = 2
/** Ctrl-C. */
export const stopped = 130

const worstFirst: readonly ExitCode[] = [130, 2, 1, 3, 0]

/** Of several plans the worst counts. */
export function worst(codes: readonly ExitCode[]): ExitCode {
  return worstFirst.find((code) => codes.includes(code)) ?? 0
}
