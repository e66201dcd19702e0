/**
 * Pictures painted in turns: one a frame, more only while they are quick, so that an answer which changes all of them never
 * holds the pointer up for the sum. What is asked for again before its turn comes is painted once, as asked last.
 */

/** Milliseconds of painting after which the next picture waits for the next frame; its raster comes on top. */
const enough = 4

const waiting = new Map<object, () => void>()
let frame = 0
let since = 0

/** Paints at the next turn; `picture` stands for what is painted. */
export function paintInTurn(picture: object, paint: () => void): void {
  if (waiting.size === 0) since = performance.now()
  waiting.set(picture, paint)
  if (frame === 0) frame = requestAnimationFrame(turn)
}

/** The picture is gone. */
export function leaveTurn(picture: object): void {
  waiting.delete(picture)
}

function turn(): void {
  const began = performance.now()
  for (const [picture, paint] of waiting) {
    waiting.delete(picture)
    paint()
    if (performance.now() - began > enough) break
  }
  frame = requestAnimationFrame(waiting.size > 0 ? turn : shown)
}

/** A frame after the last picture its pixels are there: what is read back or rastered holds the frame up until then. */
function shown(): void {
  frame = 0
  if (waiting.size > 0) frame = requestAnimationFrame(turn)
  else performance.measure('drawn', { start: since, end: performance.now() })
}
