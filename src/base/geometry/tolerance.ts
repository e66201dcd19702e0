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

/** A joint is frozen where its force is below this share of the RMS force (measured: frozen 3e-11, live 1e-4). */
export const frozenShare = 1e-7

/** Sine of the angle below which two plan directions count as parallel: far above rounding, far below any drawing's. */
export const parallelSine = 1e-9
