/** Profiles: the section of a picked run, to be typed or dragged, and held. */
import { useEffect, useRef, useState, type PointerEvent } from 'react'
import { conversion, parseLength, type Unit } from '../../base/length.ts'
import { nodeName } from '../../plan/names.ts'
import { figure, signed } from '../../paper/drawing/figures.ts'
import { heldRun } from '../../plan/project/edits.ts'
import type { Condition, Section } from '../../plan/project/condition.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDesk, useDeskState } from './context.ts'
import { LengthField, NumberField, typable } from './Fields.tsx'
import { levelAt, runSection } from '../store/run-section.ts'

type Kind = 'arc' | 'pitch' | 'levels' | 'level' | 'equal' | 'straight' | 'fall'
const kinds: readonly (readonly [Kind, string])[] = [['arc', 'arc'], ['pitch', 'pitch'], ['levels', 'levels'], ['level', 'level'], ['equal', 'equal'], ['straight', 'straight'], ['fall', 'fall']]
const width = 356
const height = 118

export function ProfileDesk({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const picked = useDeskState((state) => state.picked)
  const doc = useDeskState((state) => state.doc)
  const mirror = useDeskState((state) => state.mirror)
  const [kind, setKind] = useState<Kind>('arc')
  const drag = useRef<{ y: number; rise: number; k: number } | null>(null)
  const [levels, setLevels] = useState<readonly number[]>([])
  const runKey = picked.join(',')
  const first = picked[0]
  const last = picked[picked.length - 1]
  // Levels are taken from the roof when a run is picked, not while it moves.
  useEffect(() => setLevels(picked.map((node) => answer.roof?.heights[node] ?? 0)), [runKey])
  if (doc === null) return null
  if (picked.length < 2 || first === undefined || last === undefined) {
    return (
      <>
        <p className="entry note">Pick a run on the plan: click its first node, then its last with Shift. Or take a whole side:</p>
        <p className="entry">{sides(answer).map((side) => <button key={side.title} className="word" onClick={() => desk.set({ picked: side.nodes })}>{side.title}</button>)}</p>
      </>
    )
  }
  const section = runSection(answer, picked)
  const { unit } = doc.read.plan
  const mm = conversion(unit, 'mm')
  const name = `${nodeName(first)} to ${nodeName(last)}`
  const run = picked.map(nodeName)
  const existing = doc.brief.conditions.filter(({ at }) => 'run' in at && at.run.join() === run.join())
  const profile = existing.find((condition) => condition.kind === 'profile')
  const base = Math.min(section.level[0], section.level[section.level.length - 1])
  const heldSection: Section | null = profile?.section ?? null
  const heldBase = profile?.level ?? (profile === undefined ? base : 0)
  const rise = heldSection !== null && 'arc' in heldSection ? heldSection.arc.rise : Math.max(...section.level) - base
  const pitch = heldSection !== null && 'pitch_deg' in heldSection ? heldSection.pitch_deg : (Math.atan((2 * (Math.max(...section.level) - base)) / section.length) * 180) / Math.PI

  const conditionFor = (wished: Section): Condition => heldRun(run, wished, heldBase, profile?.soft ?? null)
  const words = (wished: Section): string => 'arc' in wished ? `${name}: arc, rise ${figure(wished.arc.rise * mm)} mm` : 'pitch_deg' in wished ? `${name}: pitch ${figure(wished.pitch_deg, 1)}°` : `${name}: ${wished.points.length} levels`
  const take = (wished: Section): void => desk.condition(conditionFor(wished), words(wished))
  const hold = (wished: Section): void => desk.holdCondition(conditionFor(wished), words(wished))
  const along = (kindOf: 'level' | 'equal' | 'straight' | 'fall', asked: object, what: string): void => {
    const called = `${kindOf} ${name}`
    desk.condition({ name: called, kind: kindOf, at: { run }, soft: existing.find((other) => other.name === called)?.soft ?? null, ...asked } as Condition, `${name} ${what}`)
  }
  // A run that is its own image keeps its levels the same from both ends.
  const isOwnImage = mirror !== null && picked.every((node, k) => mirror.node[node] === picked[picked.length - 1 - k])

  // The drawing: heights at least a tenth of the width, so that a level run can be dragged too.
  const shown = heldSection
  const tops = [...section.level, ...(shown === null ? [] : section.along.map((along) => levelAt(shown, heldBase, section.length, along)))]
  const low = Math.min(base, heldBase, ...tops)
  const high = Math.max(low + section.length * 0.12, ...tops)
  const sx = (along: number): number => 14 + (along / section.length) * (width - 28)
  const scaleY = (height - 44) / (high - low)
  const sy = (level: number): number => height - 20 - (level - low) * scaleY
  const path = (levelOf: (along: number, k: number) => number, fine: boolean): string => {
    const alongs = fine ? Array.from({ length: 41 }, (_, i) => (i / 40) * section.length) : section.along
    return alongs.map((at, k) => `${k === 0 ? 'M' : 'L'}${sx(at).toFixed(1)} ${sy(levelOf(at, k)).toFixed(1)}`).join('')
  }
  const start = (event: PointerEvent<SVGElement>, k: number): void => {
    event.currentTarget.setPointerCapture(event.pointerId)
    drag.current = { y: event.clientY, rise: k < 0 ? (kind === 'pitch' ? (section.length / 2) * Math.tan((pitch * Math.PI) / 180) : rise) : levels[k], k }
  }
  const move = (event: PointerEvent<SVGElement>): void => {
    if (drag.current === null || event.buttons === 0) return
    const value = drag.current.rise + (drag.current.y - event.clientY) / scaleY
    if (drag.current.k >= 0) {
      const next = levels.map((level, k) => (k === drag.current?.k || (isOwnImage && picked.length - 1 - k === drag.current?.k) ? value : level))
      setLevels(next)
      hold({ points: section.along.map((along, k) => [along, next[k]]) })
    } else if (kind === 'pitch') hold({ pitch_deg: Math.max(-80, Math.min(80, (Math.atan((2 * value) / section.length) * 180) / Math.PI)) })
    else hold({ arc: { rise: value } })
  }
  const end = (event: PointerEvent<SVGElement>): void => {
    if (drag.current !== null) desk.putDown(event.type !== 'pointercancel')
    drag.current = null
  }
  const knob = kind === 'arc' || kind === 'pitch'
  const knobY = sy(heldBase + (kind === 'pitch' ? (section.length / 2) * Math.tan((pitch * Math.PI) / 180) : rise))
  return (
    <>
      <p className="entry switch" role="radiogroup" aria-label="Section">
        <span>{name}</span>
        {kinds.map(([value, title]) => <button key={value} role="radio" aria-checked={kind === value} className={kind === value ? 'chosen' : ''} onClick={() => setKind(value)}>{title}</button>)}
      </p>
      <svg className="section" viewBox={`0 0 ${width} ${height}`} role="img" aria-label={`Section ${name}: chord ${figure(section.length * mm)} mm, rise ${figure(rise * mm)} mm`}>
        <path className="datum" d={`M8 ${sy(heldBase)}H${width - 8}`} />
        <path className="roof" d={path((_, k) => section.level[k], false)} />
        {shown !== null && <path className="asked" d={path((along) => levelAt(shown, heldBase, section.length, along), true)} />}
        {section.along.map((along, k) => <circle key={k} className="joint" cx={sx(along)} cy={sy(section.level[k])} r={2} />)}
        {knob && <g className="knob" onPointerDown={(event) => start(event, -1)} onPointerMove={move} onPointerUp={end} onPointerCancel={end}><circle className="reach" cx={width / 2} cy={knobY} r={14} /><path d={`M${width / 2} ${knobY - 7}l7 7-7 7-7-7Z`} /></g>}
        {kind === 'levels' && section.along.map((along, k) => <g key={k} className="knob" onPointerDown={(event) => start(event, k)} onPointerMove={move} onPointerUp={end} onPointerCancel={end}><circle className="reach" cx={sx(along)} cy={sy(levels[k] ?? 0)} r={10} /><circle cx={sx(along)} cy={sy(levels[k] ?? 0)} r={4} /></g>)}
        <text x={width / 2} y={height - 5} textAnchor="middle">chord {figure(section.length * mm)} mm</text>
      </svg>
      <div className="entry fields">
        {kind === 'arc' && <LengthField label="rise" bare="mm" to={unit} start={typable(rise * mm)} onValue={(value) => take({ arc: { rise: value } })} />}
        {kind === 'pitch' && <NumberField label="pitch °" start={typable(pitch, 1)} from={-89} below={90} onValue={(value) => take({ pitch_deg: value })} />}
        {(kind === 'arc' || kind === 'pitch') && <LengthField label="ends at" bare="mm" to={unit} start={typable(heldBase * mm)} onValue={(level) => desk.condition(heldRun(run, heldSection ?? (kind === 'arc' ? { arc: { rise } } : { pitch_deg: pitch }), level, profile?.soft ?? null), `${name}: ends at ${signed(level * mm)} mm`)} />}
        {kind === 'levels' && <LevelsField levels={levels} unit={unit} onValue={(typed) => { setLevels(typed); take({ points: section.along.map((at, k) => [at, typed[k]]) }) }} />}
        {kind === 'level' && <LengthField label="level" bare="mm" to={unit} start={typable(base * mm)} onValue={(level) => along('level', { level }, `level at ${signed(level * mm)} mm`)} />}
        {kind === 'level' && <button className="word" onClick={() => along('level', { level: null }, 'level at the datum')}>At the datum</button>}
        {kind === 'fall' && <NumberField label={'fall \u2030'} start="20" onValue={(per_mille) => along('fall', { per_mille, level: null }, `falls ${figure(per_mille, 1)} \u2030`)} />}
        {kind === 'fall' && <small className="note">from {nodeName(first)} to {nodeName(last)}; 20 {'\u2030'} are 20 mm a metre</small>}
        {kind === 'equal' && <button className="word" onClick={() => along('equal', {}, 'at one level, wherever')}>Hold at one level, wherever</button>}
        {kind === 'straight' && <button className="word" onClick={() => along('straight', {}, 'straight')}>Hold straight</button>}
        {kind === 'arc' && heldSection === null && <button className="word" onClick={() => take({ arc: { rise } })}>Hold</button>}
        {kind === 'pitch' && heldSection === null && <button className="word" onClick={() => take({ pitch_deg: pitch })}>Hold</button>}
        {existing.length > 0 && <button className="word" onClick={() => desk.release(existing.map((condition) => condition.name))}>Release</button>}
        <button className="word" onClick={() => desk.set({ picked: [] })}>Put down</button>
      </div>
    </>
  )
}

/** A level a node, typed one after the other. */
function LevelsField({ levels, unit, onValue }: { readonly levels: readonly number[]; readonly unit: Unit; readonly onValue: (levels: readonly number[]) => void }) {
  const [said, setSaid] = useState('')
  const mm = conversion(unit, 'mm')
  return (
    <label className="field wide"><span>levels, mm</span><input defaultValue={levels.map((level) => typable(level * mm)).join(' ')} key={levels.join()} onKeyDown={(event) => {
      if (event.key !== 'Enter') return
      event.stopPropagation()
      // Semicolons keep the parts of 4' 6" together; without them every blank before a number parts two levels.
      const text = event.currentTarget.value.trim()
      const words = text.split(text.includes(';') ? /\s*;\s*/ : /\s+(?=[-+\u2212\d])/)
      const typed = words.map((word) => parseLength(word, 'mm', unit))
      const wrong = words.findIndex((_, k) => !typed[k].ok)
      if (wrong >= 0) setSaid(`"${words[wrong]}" is not a length`)
      else if (typed.length !== levels.length) setSaid(`${typed.length} levels for ${levels.length} nodes`)
      else onValue(typed.flatMap((length) => (length.ok ? [length.value] : [])))
    }} /><small>{said === '' ? `${levels.length} levels, Enter` : said}</small></label>
  )
}

/** Straight stretches of the outer rim, longest first, at most six: runs that are often wanted. */
function sides({ plan }: Answer): { title: string; nodes: number[] }[] {
  const found: { title: string; nodes: number[]; length: number }[] = []
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    if (plan.rimIsVoid[l] === 1) continue
    const halves = Array.from(plan.rimHalf.subarray(plan.rimStart[l], plan.rimStart[l + 1]))
    const direction = (half: number): number => Math.atan2(plan.y[plan.origin[half ^ 1]] - plan.y[plan.origin[half]], plan.x[plan.origin[half ^ 1]] - plan.x[plan.origin[half]])
    const turns = halves.map((half, k) => Math.abs(Math.sin(direction(half) - direction(halves[(k + halves.length - 1) % halves.length]))) > 0.3)
    const from = Math.max(0, turns.indexOf(true))
    let nodes: number[] = []
    for (let k = 0; k <= halves.length; k += 1) {
      const i = (from + k) % halves.length
      const node = plan.origin[halves[i]]
      if (nodes.length > 0 && (turns[i] || k === halves.length)) {
        nodes.push(node)
        const length = Math.hypot(plan.x[node] - plan.x[nodes[0]], plan.y[node] - plan.y[nodes[0]])
        if (nodes.length > 2) found.push({ nodes, length, title: `${nodeName(nodes[0])} to ${nodeName(node)}` })
        nodes = []
      }
      nodes.push(node)
    }
  }
  return found.sort((a, b) => b.length - a.length).slice(0, 6)
}
