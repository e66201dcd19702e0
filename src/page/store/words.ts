/** The glossary of the page: the words that stand on it, in plain sentences. */
export const glossary: readonly (readonly [string, string])[] = [
  ['plan', 'What the roof looks like from above: nodes, joints and panels.'],
  ['joint', 'An edge with a panel on each side. A ridge sheds water, a valley gathers it; a flush joint does not fold here, a frozen one never folds.'],
  ['rim', 'Edges with a panel on one side only: the outer rim, and one round each void.'],
  ['void', 'A hole in the plan that carries no panel: a court, a chimney, a roof light.'],
  ['form force', 'The jump of slope across a joint. It shapes the roof and carries no load; it is not a member force.'],
  ['freedom', 'How many independent adjustments keep every panel flat while the rim is free. Tilting the whole roof is not counted.'],
  ['freedom left', 'How many are left under the conditions, tilting included. 0: exactly one roof.'],
  ['flat group', 'Panels that always stay in one plane, whatever the roof does.'],
  ['condition', 'What the roof must keep: a level, a fall, a straight run, a profile, a slope. Exact, or soft with a weight.'],
  ['flatness', 'The least distance between two parallel planes that hold all corners of a panel (minimum zone).'],
  ['corner deviation', 'How far a corner is off the plane of the others: what glaziers ask for. On a square twice the flatness.'],
  ['slope chart', 'A point a panel, where its water goes: the farther out, the steeper. Panels that share a joint are joined.'],
  ['springing', 'The lowest node of the outer rim; the rise is measured from it.'],
  ['nearest roof', 'When no exact roof exists: the one that comes nearest to flat panels at the asked rise. It is always named as such.'],
]
