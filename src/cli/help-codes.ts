export const helpCodes = ''
