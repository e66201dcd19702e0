/** Values typed as people type them: what was understood is echoed, what was not is said; Enter takes it. */
import { useEffect, useState } from 'react'
import { conversion, parseLength, type Unit } from '../../base/length.ts'
import { figure } from '../../paper/drawing/figures.ts'

interface FieldProps {
  /** Stands before the field; `named` is what it is called where nothing stands there. */
  readonly label: string
  readonly named?: string
  readonly size: number
  readonly start: string
  /** null: what is typed is no use. */
  readonly understood: (text: string) => { readonly value: number; readonly echo: string } | null
  readonly hint: string
  readonly cure: (text: string) => string
  readonly onValue: (value: number) => void
  /** Stands in an empty field: what holds where nobody asks. */
  readonly empty?: string
  /** An empty field is a value too: back to what nobody asked. */
  readonly onClear?: () => void
}

function Field({ label, named, size, start, understood, hint, cure, onValue, empty, onClear }: FieldProps) {
  const [text, setText] = useState(start)
  const [typed, setTyped] = useState(false)
  useEffect(() => { if (!typed) setText(start) }, [start, typed])
  const isEmpty = text.trim() === '' && onClear !== undefined
  const made = isEmpty ? null : understood(text)
  const take = (): boolean => {
    if (isEmpty) onClear?.()
    else if (made !== null) onValue(made.value)
    return isEmpty || made !== null
  }
  return (
    <label className="field">
      {label !== '' && <span>{label}</span>}
      <input value={text} size={size} placeholder={empty} aria-label={label === '' ? named : undefined} inputMode="text" aria-invalid={typed && !isEmpty && made === null}
        onChange={(event) => { setText(event.target.value); setTyped(true) }}
        onBlur={() => setTyped(false)}
        onKeyDown={(event) => {
          if (event.key === 'Escape') { setText(start); setTyped(false); event.currentTarget.blur() }
          if (event.key === 'Enter' && take()) { setTyped(false); event.currentTarget.blur() }
          if (event.key === 'Escape' || event.key === 'Enter') event.stopPropagation()
        }} />
      {(typed || hint !== '') && <small>{!typed ? hint : isEmpty ? 'none asked, Enter' : made === null ? cure(text) : made.echo}</small>}
    </label>
  )
}

interface Common {
  readonly label: string
  readonly named?: string
  readonly start: string
  readonly onValue: (value: number) => void
  readonly empty?: string
  readonly onClear?: () => void
}

/** A length with or without a unit; bare numbers are in `bare`, the value comes in `to`. */
export function LengthField({ bare, to, hint, ...common }: Common & { readonly bare: Unit; readonly to: Unit; readonly hint?: string }) {
  return (
    <Field {...common} size={9} hint={hint ?? bare}
      understood={(text) => {
        const parsed = parseLength(text, bare, to)
        return parsed.ok ? { value: parsed.value, echo: `= ${figure(parsed.value * conversion(to, 'mm'))} mm, Enter` } : null
      }}
      cure={(text) => {
        const parsed = parseLength(text, bare, to)
        return parsed.ok ? '' : (parsed.problem.cure ?? parsed.problem.message)
      }} />
  )
}

/** A plain number, decimal comma too; `from` and `below` bound it. */
export function NumberField({ from = -Infinity, below = Infinity, ...common }: Common & { readonly from?: number; readonly below?: number }) {
  return (
    <Field {...common} size={7} hint=""
      understood={(text) => {
        const value = numberIn(text)
        return value !== null && value >= from && value < below ? { value, echo: 'Enter' } : null
      }}
      cure={(text) => (numberIn(text) === null ? 'not a number' : from > -Infinity && below < Infinity ? `from ${figure(from)} to ${figure(below)}` : from > -Infinity ? `at least ${figure(from, 3)}` : `less than ${figure(below)}`)} />
  )
}

export function numberIn(text: string): number | null {
  const plain = text.trim().replace(',', '.').replace('\u2212', '-').replace(/[°\u2030%]$/, '').trim()
  return plain === '' || !Number.isFinite(Number(plain)) ? null : Number(plain)
}

/** A figure to begin typing from: without the thin spaces that stand in it on paper. */
export const typable = (value: number, decimals = 0): string => figure(value, decimals).replace(/\u202f/g, '')
