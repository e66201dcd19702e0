/**
 * Text without characters that steer a terminal or turn the direction of writing: a name in a drawing is always text and
 * cannot rewrite what stands on the screen. Line breaks and tabs become blanks, the others a replacement sign.
 */
export function printable(text: string): string {
  return text
    .replace(/[\t\n\v\f\r\u0085\u2028\u2029]+/g, ' ')
    .replace(/[\p{Cc}\u200e\u200f\u202a-\u202e\u2066-\u2069]/gu, '\ufffd')
}
