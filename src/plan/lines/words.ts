/** Figures and places for the sentences about repairs. */
import { significant } from '../../base/decimal.ts'
import type { Repair, RepairCode } from '../../base/repair.ts'

/** How many places a repair names at most; its count is complete. */
export const mostPlaces = 200

/** A length for a sentence: two or three digits, metres from one metre up, never a bare zero. */
export function inMillimetres(mm: number): string {
  if (mm < 0.01) return 'less than 0.01 mm'
  return mm < 999.5 ? `${significant(mm, mm >= 100 ? 3 : 2)} mm` : `${significant(mm / 1000, 3)} m`
}

/** "1 line", "12 lines". */
export function counted(count: number, one: string, many: string): string {
  return `${count} ${count === 1 ? one : many}`
}

/** Collects the places of one kind of repair. */
export class Places {
  count = 0
  /** The largest figure noted, in the plan's unit. */
  largest = 0
  readonly where: [number, number][] = []

  note(x: number, y: number, figure = 0): void {
    this.count += 1
    if (figure > this.largest) this.largest = figure
    if (this.where.length < mostPlaces) this.where.push([x, y])
  }

  repair(code: RepairCode, message: string): Repair {
    return { code, state: 'applied', count: this.count, message, where: this.where }
  }
}
