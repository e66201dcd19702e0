/** A bar with the stage's name, on a terminal only, once the work has taken a second. */
import type { Progress } from '../base/steps.ts'

export interface BarStream {
  readonly isTTY?: boolean
  readonly columns?: number
  write(text: string): unknown
}

/** How long work may take before a bar is worth a look, and how often it is drawn anew. */
const patience_ms = 1000
const redraw_ms = 100
const widest = 30

export class ProgressBar {
  private readonly started: number
  private drawn = -Infinity
  private isShown = false

  constructor(
    private readonly stream: BarStream,
    private readonly isWanted: boolean,
    private readonly clock: () => number = () => performance.now(),
  ) {
    this.started = clock()
  }

  show({ stage, done }: Progress): void {
    const now = this.clock()
    if (!this.isWanted || this.stream.isTTY !== true || now - this.started < patience_ms || now - this.drawn < redraw_ms) return
    this.drawn = now
    this.isShown = true
    const share = Math.min(1, Math.max(0, done))
    const width = Math.min(widest, (this.stream.columns === undefined || this.stream.columns === 0 ? 80 : this.stream.columns) - stage.length - 12)
    const full = Math.round(share * width)
    const bar = width < 5 ? '' : ` [${'='.repeat(full)}${' '.repeat(width - full)}]`
    this.stream.write(`\r\u001b[K${stage}${bar} ${Math.floor(100 * share)} %`)
  }

  /** Takes the bar away, so that what is printed next stands on a clean line. */
  clear(): void {
    if (!this.isShown) return
    this.isShown = false
    this.stream.write('\r\u001b[K')
  }
}
