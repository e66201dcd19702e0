/** Names of the first seven colours by their numbers (DXF reference, colour 7 is drawn black on white). */
const colourNames: Readonly<Record<string, string>> = { red: '1', yellow: '2', green: '3', cyan: '4', blue: '5', magenta: '6', white: '7', black: '7' }

/** A colour as people name it ("red", "3", "#FF8000"), as the looks of a drawing have it; null where it is none. */
export function namedColour(word: string): string | null {
  const plain = word.trim().toLowerCase()
  const named = colourNames[plain]
  if (named !== undefined) return named
  if (/^#[0-9a-f]{6}$/.test(plain)) return plain
  return /^\d{1,3}$/.test(plain) && Number(plain) >= 1 && Number(plain) <= 255 ? String(Number(plain)) : null
}
