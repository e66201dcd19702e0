/** Figures as they stand on drawings and in lists: thin no-break thousands, a true minus, a fixed number of decimals. */

const thin = '\u202f'
const minus = '\u2212'

/** The number with `decimals` digits after the point; never "-0". */
export function figure(value: number, decimals = 0): string {
  if (!Number.isFinite(value)) return '\u2013'
  const fixed = Math.abs(value).toFixed(decimals)
  const [whole = '0', fraction] = fixed.split('.')
  const grouped = whole.length > 3 ? whole.replace(/\B(?=(\d{3})+$)/g, thin) : whole
  const negative = value < 0 && Number(fixed) !== 0
  return `${negative ? minus : ''}${grouped}${fraction === undefined ? '' : `.${fraction}`}`
}

/** The same with a plus on positive numbers: for heights above the datum and for changes. */
export function signed(value: number, decimals = 0): string {
  const text = figure(value, decimals)
  return value > 0 && Number(Math.abs(value).toFixed(decimals)) !== 0 ? `+${text}` : text
}

/** "1 panel", "12 panels". */
export function counted(count: number, one: string, many = `${one}s`): string {
  return `${figure(count)} ${count === 1 ? one : many}`
}

const points = ['N', 'NE', 'E', 'SE', 'S', 'SW', 'W', 'NW'] as const

/** The eighth of the compass that a bearing (degrees clockwise from north) lies in. */
export function compassPoint(bearing: number): string {
  return points[Math.round((((bearing % 360) + 360) % 360) / 45) % 8] ?? 'N'
}

/** A flatness in mm as said in sentences: a figure below the last digit shown is never written as nought. */
export function flatness(mm: number): string {
  return mm < 0.005 ? 'better than 0.01 mm' : `${figure(mm, 2)} mm`
}

/** A round length at most `most`: 1, 2 or 5 times a power of ten. */
export function roundLength(most: number): number {
  if (!(most > 0)) return 1
  const power = 10 ** Math.floor(Math.log10(most))
  const lead = most / power
  return power * (lead >= 5 ? 5 : lead >= 2 ? 2 : 1)
}

export type SlopeUnit = 'degrees' | 'percent' | 'ratio'

/** A slope of `degrees` in the unit asked for: 5.0°, 8.7 %, 1:11.4. */
export function slopeFigure(degrees: number, unit: SlopeUnit = 'degrees', decimals = 1): string {
  const rise = Math.tan((degrees * Math.PI) / 180)
  switch (unit) {
    case 'degrees': return `${figure(degrees, decimals)}°`
    case 'percent': return `${figure(100 * rise, decimals)}${thin}%`
    case 'ratio': return rise < 1e-6 ? 'level' : `1:${figure(1 / rise, decimals)}`
  }
}
