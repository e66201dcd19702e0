export const helpFormats = ''
