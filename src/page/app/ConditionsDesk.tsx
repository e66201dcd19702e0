/** What the roof must keep, listed as it was put down, with how much freedom it leaves, what clashes, and what letting go gives. */
import { useEffect, useState } from 'react'
import { conversion } from '../../base/length.ts'
import { figure } from '../../paper/drawing/figures.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import type { Release } from '../../job/session.ts'
import { BindingNote } from './BindingNote.tsx'
import { ConditionFields, askedWords } from './ConditionFields.tsx'
import { useDesk, useDeskState } from './context.ts'
import { LengthField, NumberField, typable } from './Fields.tsx'
import { OneWayRow } from './OneWayRow.tsx'
import { rimsOf } from '../store/rims.ts'

export function ConditionsDesk({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const doc = useDeskState((state) => state.doc)
  const [open, setOpen] = useState('')
  if (doc === null) return null
  const { conditions } = doc.brief
  const { unit } = doc.read.plan
  const mm = conversion(unit, 'mm')
  const { clashes, binding = [], unmet = [] } = answer.summary.held
  const isBound = (name: string): boolean => [...binding, ...unmet].some(({ condition }) => condition === name)
  return (
    <>
      <RimRows answer={answer} />
      <AllPanels answer={answer} />
      <OneWayRow answer={answer} />
      {conditions.length === 0 ? <p className="entry note">Nothing is held. Select a node, a joint or a panel on the plan and hold it; Shift and a second node picks a run; Ctrl and click, or G, gathers several.</p> : (
        <table className="conditions">
          <thead><tr><th>Held</th><th>asked</th><th>how</th><th /></tr></thead>
          <tbody>
            {conditions.map((condition) => {
              const { name, soft } = condition
              const off = condition.off === true
              const clashing = clashes.some((clash) => clash.conditions.includes(name))
              const isOpen = open === name
              return [
                <tr key={name} className={off ? 'off' : clashing ? 'clash' : ''}>
                  <td><label><input type="checkbox" checked={!off} aria-label={`${name} on`} onChange={() => desk.switchCondition(name)} /> {name}</label></td>
                  <td><button className="word" aria-expanded={isOpen} title="type over it" onClick={() => setOpen(isOpen ? '' : name)}>{askedWords(condition, mm)}</button></td>
                  <td><button className="word" title="exact or soft" onClick={() => { desk.soften(name, soft === null ? 1 : null); setOpen(soft === null ? name : '') }}>{soft === null ? 'exact' : `soft \u00d7${figure(soft, soft < 1 ? 2 : Number.isInteger(soft) ? 0 : 1)}`}</button></td>
                  <td><button className="word" aria-label={`Release ${name}`} onClick={() => desk.release([name])}>Release</button></td>
                </tr>,
                isBound(name) && <tr key={`${name} bound`} className="opened"><td colSpan={4}><BindingNote name={name} held={answer.summary.held} /></td></tr>,
                isOpen && <tr key={`${name} fields`} className="opened"><td colSpan={4}><ConditionFields condition={condition} unit={unit} /></td></tr>,
              ]
            })}
          </tbody>
        </table>
      )}
      <p className="entry" role="status">
        {freedomWords(answer, conditions.length)}
        {clashes.map((clash, i) => <span key={i} className="fault"> {clash.conditions.join(' and ')} clash{clash.conditions.length === 1 ? 'es with the flatness of the panels' : ''}, by {clash.misfit_mm < 0.05 ? 'less than 0.1' : figure(clash.misfit_mm, 1)} mm.</span>)}
        {conditions.length > 1 && <> <button className="word" onClick={() => desk.release(conditions.map(({ name }) => name))}>Release all</button></>}
      </p>
      <Releases answer={answer} />
    </>
  )
}

function freedomWords(answer: Answer, held: number) {
  const { freedomLeft, freedom } = answer.summary.stress
  if (freedomLeft === null) return <b className="fault">No roof meets all of these.</b>
  if (held === 0) return `Freedom with the rim free: ${figure(freedom)}, tilts not counted.`
  if (freedomLeft > 0) return `Freedom left: ${figure(freedomLeft)}, tilts counted.`
  return answer.summary.held.frozenJoints === answer.plan.jointCount ? 'Only one roof meets these, and no joint folds in it.' : 'Exactly one roof meets these.'
}

/** What letting go of one gives, where conditions clash or leave no fold. */
function Releases({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const releases = useDeskState((state) => state.releases)
  const fresh = useDeskState((state) => state.fresh && state.inHand === null)
  const { held, stress } = answer.summary
  const asked = held.clashes.length > 0 || (held.frozenJoints === answer.plan.jointCount && stress.freedom > 0 && answer.conditions.some(({ soft }) => !soft))
  useEffect(() => { if (asked && fresh) void desk.askReleases() }, [asked, fresh, answer, desk])
  if (!asked || releases === null || releases.length === 0) return null
  return (
    <ul className="releases" aria-label="What letting go of one gives">
      {releases.map((release) => <li key={release.name}><button className="word" onClick={() => desk.release([release.name])}>Release {release.name}</button>: {releaseWords(release)}.</li>)}
    </ul>
  )
}

function releaseWords({ verdict, freedomLeft }: Release): string {
  if (freedomLeft === null) return 'the others still clash'
  const left = `freedom left ${figure(freedomLeft)}`
  switch (verdict) {
    case 'lifts': return `every joint folds, ${left}`
    case 'lifts in part': return `some joints fold, ${left}`
    case 'lifts within plan tolerance': return 'it lifts within the plan tolerance'
    case 'lifts within tolerance': return 'the nearest roof is flat within the tolerance'
    case 'does not lift': return 'still no joint folds'
  }
}

/** What is asked of the whole roof: bounds on its levels and slopes, water that runs off, folds that go one way. */
function AllPanels({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const conditions = useDeskState((state) => state.doc?.brief.conditions)
  const { unit } = answer.plan
  const mm = conversion(unit, 'mm')
  const at = { panels: 'all' } as const
  const held = (name: string) => conditions?.find((condition) => condition.name === name)
  const ponding = { name: 'no ponding', kind: 'no-ponding', at, soft: null } as const
  const valleys = { name: 'no valleys', kind: 'one-way', at, fold: 'no-valley', soft: null } as const
  const bounds = held('levels of the roof')
  const [least, most] = bounds?.kind === 'bounds' ? [bounds.least ?? null, bounds.most ?? null] : [null, null]
  const slope = held('slopes of the roof')
  return (
    <div className="entry switch" role="group" aria-label="All panels">
      <span>All panels</span>
      {[ponding, valleys].map((condition) => <button key={condition.name} aria-pressed={held(condition.name) !== undefined} className={held(condition.name) !== undefined ? 'chosen' : ''} onClick={() => (held(condition.name) !== undefined ? desk.release([condition.name]) : desk.condition(condition, condition.name))}>{condition.name}</button>)}
      <NumberField label="slope at least °" start={slope?.kind === 'slope' && typeof slope.least_deg === 'number' ? typable(slope.least_deg, 1) : ''} from={0} below={90} onClear={() => slope !== undefined && desk.release([slope.name])}
        onValue={(least_deg) => desk.condition({ name: 'slopes of the roof', kind: 'slope', at, least_deg, most_deg: slope?.kind === 'slope' ? (slope.most_deg ?? null) : null, soft: null }, `Slopes of at least ${figure(least_deg, 1)}°`)} />
      <LengthField label="no higher than" bare="mm" to={unit} start={most === null ? '' : typable(most * mm)} onClear={() => bounds !== undefined && desk.release([bounds.name])}
        onValue={(value) => desk.condition({ name: 'levels of the roof', kind: 'bounds', at, least, most: value, soft: null }, `No higher than ${figure(value * mm)} mm`)} />
    </div>
  )
}

/** Each rim: free, at the datum, at a level that is typed, at one level wherever. */
function RimRows({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const doc = useDeskState((state) => state.doc)
  if (doc === null) return null
  const { unit } = doc.read.plan
  const mm = conversion(unit, 'mm')
  return (
    <>
      {rimsOf(answer.plan).slice(0, 6).map(({ title, at }) => {
        const held = doc.brief.conditions.find((condition) => condition.name === title || ('rim' in condition.at && String(condition.at.rim) === String(at)))
        const name = held?.name ?? title
        const level = held?.kind === 'level' ? held.level : null
        const chosen = held === undefined ? 'free' : held.kind === 'equal' ? 'equal' : held.kind === 'level' && held.level === null ? 'datum' : 'typed'
        const radio = (value: string, words: string, take: () => void) => <button role="radio" aria-checked={chosen === value} className={chosen === value ? 'chosen' : ''} onClick={take}>{words}</button>
        return (
          <div key={title} className="entry switch" role="radiogroup" aria-label={title}>
            <span>{title[0].toUpperCase() + title.slice(1)}</span>
            {radio('free', 'free', () => held !== undefined && desk.release([name]))}
            {radio('datum', 'level at the datum', () => desk.condition({ name, kind: 'level', at: { rim: at }, level: null, soft: null }, `${name} level at the datum`))}
            {radio('equal', 'level, wherever', () => desk.condition({ name, kind: 'equal', at: { rim: at }, soft: null }, `${name} level, wherever`))}
            <LengthField label="level at" bare="mm" to={unit} start={level === null ? '' : typable(level * mm)} onValue={(value) => desk.condition({ name, kind: 'level', at: { rim: at }, level: value, soft: null }, `${name} level at ${figure(value * mm)} mm`)} />
          </div>
        )
      })}
    </>
  )
}
