/** Drawing 3: the raised roof, its stock views and the exaggeration of heights. */
import { lazy, Suspense, useRef } from 'react'
import { figure } from '../../paper/drawing/figures.ts'
import { sides, viewWords } from '../../paper/drawing/projection.ts'
import { conversion } from '../../base/length.ts'
import { useDesk, useDeskState } from './context.ts'
import type { OnCamera } from './RoofHand.tsx'
import { useSize, type Size } from './useSize.ts'

// three is a third of the page: the sheet stands before it has come.
const RoofCanvas = lazy(async () => ({ default: (await import('./RoofCanvas.tsx')).RoofCanvas }))
const RoofHand = lazy(async () => ({ default: (await import('./RoofHand.tsx')).RoofHand }))

export function RoofPane({ planSize }: { readonly planSize: Size }) {
  const desk = useDesk()
  const answer = useDeskState((state) => state.answer)
  const side = useDeskState((state) => state.side)
  const turned = useDeskState((state) => state.turned)
  const exaggeration = useDeskState((state) => state.exaggeration)
  const fresh = useDeskState((state) => state.fresh || state.busy === null)
  const box = useRef<HTMLDivElement>(null)
  const size = useSize(box)
  const onCamera: OnCamera = useRef(null)
  const roof = answer?.roof ?? null
  const near = answer?.summary.near === true
  const rise = answer?.summary.roof?.rise
  const mm = (value: number): string => figure(value * conversion(answer?.plan.unit ?? 'm', 'mm'))
  return (
    <section className="pane roof" data-pane="roof" aria-labelledby="roof-title">
      <header>
        <h2 id="roof-title">3 {near ? 'Nearest roof' : 'Roof'}</h2>
        <div className="switch" role="radiogroup" aria-label="Seen from">
          <span aria-hidden="true">seen from</span>
          {sides.map((name) => (
            <button key={name} role="radio" data-first={name === 'south' ? true : undefined} aria-checked={side === name && turned === null} className={side === name && turned === null ? 'chosen' : ''} onClick={() => desk.view(name)}>
              {name === 'eye' ? 'the eye' : name}
            </button>
          ))}
        </div>
      </header>
      <div className="stage">
        <div ref={box} className={fresh ? 'drawing' : 'drawing faded'} role="img" aria-label={roof === null ? 'Roof, empty' : `${near ? 'Nearest roof, not exact' : 'Roof'}, seen ${viewWords(side)}${rise === undefined ? '' : `, rise ${mm(rise)} mm`}`}>
          {answer !== null && roof !== null && <Suspense fallback={null}><RoofCanvas answer={answer} size={size} planSize={planSize} onCamera={onCamera} /></Suspense>}
        </div>
        {answer !== null && roof !== null && size.width > 0 && (
          <Suspense fallback={null}><RoofHand answer={answer} roof={roof} size={size} onCamera={onCamera} exaggeration={exaggeration} stands={side === 'south' && turned === null && planSize.width === size.width} /></Suspense>
        )}
        {answer === null && <p className="will">The raised roof: drag to turn it, click a panel to find it everywhere.</p>}
        {answer !== null && roof === null && <p className="will">Not raised: no roof meets the conditions.</p>}
        {roof !== null && (
          <p className="foot"><span>
            {near ? 'Not exact: panels are warped. ' : ''}
            Seen {turned ?? viewWords(side)}. Heights drawn{' '}
            {[1, 2, 5].map((times) => (
              <button key={times} className={exaggeration === times ? 'word chosen' : 'word'} aria-pressed={exaggeration === times} onClick={() => desk.set({ exaggeration: times })}>{`\u00d7${times}`}</button>
            ))}
            {exaggeration !== 1 && <strong className="fault"> Heights are drawn {exaggeration} times too high.</strong>}
          </span></p>
        )}
      </div>
    </section>
  )
}
