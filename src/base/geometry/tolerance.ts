/**
 * Every geometric tolerance of the program, in one place, each derived from the size of the model or the precision of
 * its numbers. Lengths are in working coordinates (longer side of the plan's bounding box = 1) unless said otherwise.
 */

/** Relative spacing of doubles at 1. */
export const epsilon = 2 ** -52

/**
 * tau: eigenvalues of the flatness form below this count as lifts. Exact lifts sit at rounding (3e-16), the lowest near
 * lifts of N cells at about 3 / N^2 (3e-10 at 100,000 panels), so 1e-13 parts them at every size that fits in memory.
 */
export const tau = 1e-13

/** A count is only called decided when it is the same here. */
export const tauCoarse = 1e-11

/**
 * A row on heights that every lift leaves within this share of its terms is the same in all roofs: lifts are flat to 5e-14, and
 * the least fold of a live joint moves its row by 1e-9 at 100,000 panels.
 */
export const fixedShare = 1e-10

/** A joint is frozen where its force is below this share of the RMS force (measured: frozen 3e-11, live 1e-4). */
export const frozenShare = 1e-7

/** Sine of the angle below which two plan directions count as parallel: far above rounding, far below any drawing's. */
export const parallelSine = 1e-9

/** Sine below which a node drawn on a straight joint counts as on it: 1 um in a metre, what a drawing's digits give. */
export const collinearSine = 1e-6

/** Relative change below which the iteration towards the nearest roof stops: past it the change is below the digits written. */
export const nearestShare = 1e-11

/** If the roof keeps less than this share of the wish, the wish says nothing about the roof. */
export const keptShare = 1e-3

/** A node belongs to a run drawn through it when it lies within this of the line: what drawings are set out to, in mm .. */
export const runWithin_mm = 1

/** .. or within this share of the span, the larger of the two: six digits of a coordinate. */
export const runWithin = 1e-6

/** How far from a node or joint a point may be put that means it, in mm: a hand's breadth on site, far below a panel. */
export const pointWithin_mm = 50

/**
 * A reduced condition row without a weight above this is a combination of the rows before it. Rounding leaves 1e-16 times
 * the growth of a few hundred rows; runs drawn twice with ends 1e-6 apart differ by 1e-12; weights that mean something are
 * ratios of drawn lengths, 1e-8 and more.
 */
export const rankWeight = 1e-10

/** Heights that differ by less than this share of the span agree: 10 nm in 10 m, above rounding, below any set-out. */
export const clashHeight = 1e-9

/**
 * Three corners hold a plane when the triangle they make is higher than this share of its longest side: flatter ones
 * carry the plane no better than sqrt(tau) = 3e-7, so that the count and the propagation of planes might disagree.
 */
export const planeSine = 1e-5

/** Slopes (rise over run) below this are level, folds below it flush: at 10 m run a hundred-millionth of a metre. */
export const levelSlope = 1e-9

/**
 * A drawn path that ends within this share of its own size from its start is closed: relative commands with three
 * decimals drift this far, and 0.2 mm in 2 m is no gap that anybody draws.
 */
export const closesWithin = 1e-4

/** A rectangle whose sides lie within this share of the page from the page's own covers the page. */
export const coversWithin = 1e-3

/** Areas, lengths and direction sines of rectangles that differ by less than this share are equal: rounding of a hull in survey coordinates. */
export const areaTie = 1e-9

/** The plan tolerance of a drawing, in mm: line ends nearer than this are one node. Our own choice, below any joint's width. */
export const snap_mm = 1

/** The snap distance is never more than this share of the drawing's shorter edges (the lower quartile), whatever the unit. */
export const snapShare = 1 / 20

/** What moves by less than this share of the snap distance is rounding of the file's digits and no repair: 1 um of 1 mm. */
export const silentShare = 1e-3

/** Spacings of doubles, at the largest coordinate, that count as one point: transformed blocks differ by a few. */
export const roundingSteps = 8

/** Coordinates beyond this many metres are no building plan: survey coordinates in mm, taken for metres, reach 1e10. */
export const farthest_m = 1e12

/** A drawing smaller than this, in metres, is a point. */
export const smallest_m = 1e-6

/** Heights of one node that differ by more than this, in mm, contradict each other. */
export const heightsAgree_mm = 10

/** Crossings of lines that are taken at most: 100,000 panels of crossing lines have as many; more is a hatch or a text. */
export const mostCrossings = 400_000

/** Pairs of lines, or of a line and a node, compared at most: about five seconds. */
export const mostPairs = 1_000_000_000

/** Nodes on the inside of lines at most: thousands of lines drawn over each other. */
export const mostTouches = 5_000_000

/** Two edges from one node that part at more than this sine (about a degree) are two edges, however short; less is one drawn twice. */
export const splitSine = 0.02

/** A void whose mean width is below this, in mm, is a gap between outlines rather than an opening. */
export const gap_mm = 20

/** Strips are bars when the panes beside them are at least this much wider: 150 mm timber between panes of 600 mm is 3.3 times. */
export const barShare = 2.5

/** Share of the panes' edges that run along strips or gaps before the plan counts as drawn with bars: fewer may be narrow panels. */
export const barsAlong = 0.5

/** A strip or gap whose width changes by more than this share along itself is a wedge and no bar. */
export const barTaper = 0.15

/** Cosine of the angle up to which two edges face each other across a bar: 3 degrees, 1 mm of noise in 20 mm. */
export const facingCosine = 0.9986

/** Two centre lines that part at less than this sine (3 degrees) have no crossing that a drawing's digits could place. */
export const bendSine = 0.05

/** Sine of the turn up to which two edges at a node go on along one run: 3 degrees, 26 mm at the end of half a metre. */
export const runSine = 0.05

/** Nodes off the line of their run by less than this, in mm, are as straight as coordinates are written. */
export const straight_mm = 0.01

/** A run is nearly straight when no node is farther off it than this many plan tolerances; beyond it is meant to bend. */
export const nearlyStraight = 10

/** Turns up to this many times `runSine` are looked at to see whether straight runs are meant .. */
export const widerTurns = 4

/** .. which they are not where turns beyond `runSine` are more than this many times those within: evenly spread turns are three times as many. */
export const turnsByChance = 2

/** Bays are nearly equal when they differ by no more than a run may bend, and by this share of the bay at most: 1.500 and 1.530 m are two bays. */
export const bayShare = 0.02

/** Runs off a common right angle by less than this (sine, 4 mm at 1.5 m) may be meant to be square: of runs that lie anyhow one in 300. */
export const squareSine = 0.0026

/** Sizes (square roots of areas) between which a face may be a panel, in metres: common practice, no source; a pane of 20 cm to a bay of 20 m2. */
export const panelSizes_m = [0.2, 4.5] as const

/** A panel is compact: 4 pi A / P^2 is at least this, which is a rectangle of 1 to 13. */
export const leastCompact = 0.2

/** Panels side by side are of about one size: up to this factor. */
export const likeSizes = 3

/** .. and lie within this share of their size of each other: a bar or a gutter is narrower, the space between two figures is wider. */
export const nearShare = 0.3

/** Lines of which less than this share is loose, and faces of which less than this share look like no panels, are a clean plan. */
export const cleanShare = 0.02

/** Panels of two layers or figures are of one kind when their usual sizes differ by less than this factor. */
export const alikeSizes = 1.6

/** Lines at heights this far apart may be storeys, in metres: less than a floor to stand on, more than a step of a roof. Our own choice. */
export const leastStorey_m = 2

/** Figures whose sides differ by less than this share are copies of one another: other storeys, or other states. */
export const sameExtent = 0.02

/** A building axis is at least this many radii of its circle long: a leader to a number in a circle is short. */
export const axisRadii = 6

/** Share of the circle's radius by which the line of an axis may miss its circle or its middle. */
export const axisOff = 0.15

/** Sine of the turn from which two lines meet at a corner rather than follow a curve: 17 degrees, twice the turn of a chord of 5 mm sagitta at 1 m radius. */
export const cornerSine = 0.3
