/** 0, 1, 2 .. n - 1: the index of a list that names everything in order. */
export function ascending(n: number): Int32Array {
  const index = new Int32Array(n)
  for (let i = 0; i < n; i += 1) index[i] = i
  return index
}
