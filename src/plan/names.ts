/** Names that people read: 1-based, the same in every file, screen and picture. */

export const panelName = (panel: number): string => `P${panel + 1}`
export const nodeName = (node: number): string => `N${node + 1}`
export const jointName = (joint: number): string => `J${joint + 1}`

/** The index behind a name like "P12" for the letter given, -1 when the text is not such a name. */
export function indexOfName(text: string, letter: 'P' | 'N' | 'J'): number {
  const match = /^([PNJ])([1-9]\d{0,8})$/.exec(text.trim().toUpperCase())
  return match !== null && match[1] === letter ? Number(match[2]) - 1 : -1
}
