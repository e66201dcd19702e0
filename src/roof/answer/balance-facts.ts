/** What came of balancing a plan: what `summary.json` holds under `balanced`. */
export interface BalanceFacts {
  /** crossed: panels would turn inside out or cross, so nothing was written but the summary. */
  readonly outcome: 'balanced' | 'crossed'
  readonly densities: 'uniform' | 'fit' | 'length' | 'typed'
  /** Panels that turn inside out or cross themselves. */
  readonly crossed: readonly string[]
  readonly largest_mm: number
  readonly rms_mm: number
  /** Nodes that moved by more than 1 mm. */
  readonly count: number
}
