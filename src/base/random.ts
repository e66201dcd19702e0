/**
 * Seeded random numbers in [0, 1): the same on every machine, so that the same input gives the same bytes.
 * Mulberry32 (Tommy Ettinger, public domain): 32 bits of state, good enough for test vectors and probe directions.
 */
export function random(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6d2b79f5) >>> 0
    let t = Math.imul(state ^ (state >>> 15), 1 | state)
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}

/** A vector of `n` independent standard normal numbers (Box and Muller 1958). */
export function gaussians(n: number, seed: number): Float64Array {
  const next = random(seed)
  const out = new Float64Array(n)
  for (let i = 0; i < n; i += 2) {
    const radius = Math.sqrt(-2 * Math.log(1 - next()))
    const angle = 2 * Math.PI * next()
    out[i] = radius * Math.cos(angle)
    if (i + 1 < n) out[i + 1] = radius * Math.sin(angle)
  }
  return out
}
