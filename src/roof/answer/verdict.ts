/** Whether a plan lifts under its conditions. */
export type Verdict = 'lifts' | 'lifts in part' | 'lifts within plan tolerance' | 'lifts within tolerance' | 'does not lift'
