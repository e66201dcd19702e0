/** Words of a file as they may stand in a sentence: no control characters, no line of a thousand letters. */

/** Without control characters and line ends of any kind, cut after `longest` characters. */
export function printable(text: string, longest = 60): string {
  const plain = text.trim().replace(/[\u0000-\u001f\u007f-\u009f\u2028\u2029\ufeff]/g, '\ufffd')
  return plain.length > longest ? `${plain.slice(0, longest)}...` : plain
}

/** The same in quotes. */
export const quoted = (text: string, longest = 24): string => `"${printable(text, longest)}"`
