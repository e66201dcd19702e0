/**
 * Names in a DXF with their escapes undone: \U+XXXX is a character, %%nnn a character by its decimal number, %%d %%c
 * %%p the signs for degree, diameter and plus-minus, ^J and its like control characters (dropped).
 *
 * Source: DXF reference, "String group code value formats" and "Control codes and special characters".
 */
export function dxfText(text: string): string {
  if (!/[\\%^]/.test(text)) return text
  return text
    .replace(/\\U\+([0-9a-fA-F]{4})/g, (_, digits: string) => String.fromCharCode(parseInt(digits, 16)))
    .replace(/%%(\d{3}|[dcp%])/gi, (whole: string, code: string) => special(code.toLowerCase()) ?? whole)
    .replace(/\^([@-_ ])/g, (_, letter: string) => (letter === ' ' ? '^' : ''))
}

function special(code: string): string | null {
  switch (code) {
    case 'd': return '\u00b0'
    case 'c': return '\u2300'
    case 'p': return '\u00b1'
    case '%': return '%'
    default: return Number(code) >= 32 && Number(code) < 256 ? String.fromCharCode(Number(code)) : null
  }
}
