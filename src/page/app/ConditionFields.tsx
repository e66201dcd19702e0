/** The figures of a condition that is put down already, to be typed over where it is listed. */
import { conversion, type Unit } from '../../base/length.ts'
import { compassPoint, figure, signed } from '../../paper/drawing/figures.ts'
import type { Condition, Fold } from '../../plan/project/condition.ts'
import { useDesk } from './context.ts'
import { LengthField, NumberField, typable } from './Fields.tsx'
import { forceWords } from './JointPlate.tsx'

const folds: readonly Fold[] = ['ridge', 'valley', 'flush']

export function ConditionFields({ condition, unit }: { readonly condition: Condition; readonly unit: Unit }) {
  const desk = useDesk()
  const mm = conversion(unit, 'mm')
  const { name } = condition
  const change = (next: Condition): void => desk.condition(next, `${name}: ${askedWords(next, mm)}`)
  return (
    <div className="entry fields">
      {(condition.kind === 'level' || (condition.kind === 'profile' && !('points' in condition.section)) || condition.kind === 'fall') && (
        <LengthField label={condition.kind === 'fall' ? 'from level' : 'level'} bare="mm" to={unit} start={condition.level === null ? '' : typable(condition.level * mm)}
          hint={condition.level === null ? (condition.kind === 'fall' ? 'open' : 'datum') : 'mm'} onValue={(level) => change({ ...condition, level } as Condition)} onClear={() => change({ ...condition, level: null } as Condition)} />
      )}
      {condition.kind === 'fall' && <NumberField label={'fall \u2030'} start={typable(condition.per_mille, 1)} onValue={(per_mille) => change({ ...condition, per_mille })} />}
      {condition.kind === 'plane' && <>
        <NumberField label="slope °" start={typable(condition.pitch_deg, 1)} from={0} below={90} onValue={(pitch_deg) => change({ ...condition, pitch_deg })} />
        <NumberField label="falls to °" start={typable(condition.bearing_deg, 1)} onValue={(bearing_deg) => change({ ...condition, bearing_deg })} />
      </>}
      {condition.kind === 'form-force' && <>
        <NumberField label="force" start={typeof condition.force === 'number' ? typable(condition.force, 3) : ''} onValue={(force) => change({ ...condition, force })} />
        {folds.map((force) => <button key={force} className="word" aria-pressed={condition.force === force} onClick={() => change({ ...condition, force })}>{force}</button>)}
      </>}
      {condition.kind === 'profile' && 'arc' in condition.section && <LengthField label="rise" bare="mm" to={unit} start={typable(condition.section.arc.rise * mm)} onValue={(rise) => change({ ...condition, section: { arc: { rise } } })} />}
      {condition.kind === 'profile' && 'pitch_deg' in condition.section && <NumberField label="pitch °" start={typable(condition.section.pitch_deg, 1)} from={-89} below={90} onValue={(pitch_deg) => change({ ...condition, section: { pitch_deg } })} />}
      {condition.kind === 'bounds' && (['least', 'most'] as const).map((end) => (
        <LengthField key={end} label={end === 'least' ? 'no lower than' : 'no higher than'} bare="mm" to={unit} start={typeof condition[end] === 'number' ? typable(condition[end] * mm) : ''}
          onValue={(value) => change({ ...condition, [end]: value })} {...(typeof condition[end === 'least' ? 'most' : 'least'] !== 'number' ? {} : { onClear: () => change({ ...condition, [end]: null }) })} />
      ))}
      {condition.kind === 'slope' && (['least_deg', 'most_deg'] as const).map((end) => (
        <NumberField key={end} label={end === 'least_deg' ? 'at least °' : 'at most °'} from={0} below={90} start={typeof condition[end] === 'number' ? typable(condition[end], 1) : ''}
          onValue={(value) => change({ ...condition, [end]: value })} {...(typeof condition[end === 'least_deg' ? 'most_deg' : 'least_deg'] !== 'number' ? {} : { onClear: () => change({ ...condition, [end]: null }) })} />
      ))}
      {condition.kind === 'one-way' && (['ridge', 'valley', 'no-valley', 'no-ridge'] as const).map((fold) => <button key={fold} className="word" aria-pressed={condition.fold === fold} onClick={() => change({ ...condition, fold })}>{fold.replace('-', ' ')}</button>)}
      <Weight condition={condition} />
      <button className="word" onClick={() => desk.locate(condition)}>Show</button>
      <button className="word" onClick={() => desk.release([name])}>Release</button>
    </div>
  )
}

/** Exact, or a wish with a weight beside the shape's 1. */
function Weight({ condition: { name, soft } }: { readonly condition: Condition }) {
  const desk = useDesk()
  return (
    <>
      <button className="word" aria-pressed={soft === null} onClick={() => desk.soften(name, soft === null ? 1 : null)}>{soft === null ? 'Make it soft' : 'Make it exact'}</button>
      {soft !== null && <NumberField label="weight" start={typable(soft, soft < 1 ? 3 : 1)} from={1e-6} onValue={(weight) => desk.soften(name, weight)} />}
    </>
  )
}

/** What a condition asks, in a few words; `mm` a plan unit. */
export function askedWords(condition: Condition, mm: number): string {
  switch (condition.kind) {
    case 'level': return condition.level === null ? 'at the datum' : `${signed(condition.level * mm)} mm`
    case 'fall': return `${figure(condition.per_mille, 1)} \u2030${condition.level === null ? '' : ` from ${signed(condition.level * mm)} mm`}`
    case 'plane': return `${figure(condition.pitch_deg, 1)}° ${compassPoint(condition.bearing_deg)}`
    case 'profile': return 'arc' in condition.section ? `arc, rise ${figure(condition.section.arc.rise * mm)} mm` : 'pitch_deg' in condition.section ? `pitch ${figure(condition.section.pitch_deg, 1)}°` : `${condition.section.points.length} levels`
    case 'straight': return 'straight'
    case 'equal': return 'equal levels'
    case 'coplanar': return 'one plane'
    case 'flush': return 'flush'
    case 'form-force': return typeof condition.force === 'string' ? condition.force : forceWords(condition.force)
    case 'bounds': {
      const [least, most] = [condition.least ?? null, condition.most ?? null].map((level) => (level === null ? null : `${signed(level * mm)} mm`))
      return least === null ? `at most ${most ?? ''}` : most === null ? `at least ${least}` : `${least} to ${most}`
    }
    case 'one-way': return condition.fold.replace('-', ' ')
    case 'slope': {
      const [least, most] = [condition.least_deg ?? null, condition.most_deg ?? null].map((angle) => (angle === null ? null : `${figure(angle, 1)}°`))
      return least === null ? `at most ${most ?? ''}` : most === null ? `at least ${least}` : `${least} to ${most}`
    }
    case 'no-ponding': return 'no ponding'
  }
}
