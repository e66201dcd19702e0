/** The panel list: only the rows in sight exist, so that 100,000 panels scroll like fifty. */
import { useDeferredValue, useEffect, useMemo, useRef, useState, type KeyboardEvent } from 'react'
import { panelName } from '../../plan/names.ts'
import { compassPoint, figure } from '../../paper/drawing/figures.ts'
import { useDesk, useDeskState } from './context.ts'
import { hundredths, ordered, rowsOf } from '../store/rows.ts'
import type { ListColumn, ListFilter } from '../store/state.ts'
import { useLimits } from './useReading.ts'
import { useSize } from './useSize.ts'

const rowHeight = 20
const columns: readonly (readonly [ListColumn, string, string])[] = [
  ['panel', 'Panel', ''], ['area', 'area', 'm\u00b2'], ['slope', 'slope', '°'], ['fall', 'falls', 'to'], ['corner', 'corner', 'mm'], ['flat', 'flat', 'mm'],
]
const sortedBy: Readonly<Record<ListColumn, readonly [up: string, down: string]>> = {
  panel: ['by name', 'last first'], area: ['smallest first', 'largest first'], slope: ['least slope first', 'steepest first'],
  fall: ['by bearing', 'by bearing, last first'], corner: ['least corner deviation first', 'greatest corner deviation first'], flat: ['flattest first', 'least flat first'],
}

export function PanelList() {
  const desk = useDesk()
  // The drawings come first: a list a moment late is not missed.
  const answer = useDeferredValue(useDeskState((state) => state.answer))
  const sort = useDeskState((state) => state.sort)
  const filter = useDeskState((state) => state.filter)
  const selected = useDeskState((state) => (state.selection?.kind === 'panel' ? state.selection.index : -1))
  const { leastSlope, flat_mm } = useLimits()
  const box = useRef<HTMLDivElement>(null)
  const { height } = useSize(box)
  const [top, setTop] = useState(0)
  const rows = useMemo(() => (answer === null ? null : rowsOf(answer, leastSlope, flat_mm)), [answer, leastSlope, flat_mm])
  const groupOfSelected = filter === 'group' ? selected : -1
  const order = useMemo(() => (answer === null || rows === null ? new Int32Array() : ordered(rows, answer, sort, filter, groupOfSelected)), [answer, rows, sort, filter, groupOfSelected])
  const flagged = useMemo(() => rows?.flag.reduce((sum, flag) => sum + (flag > 0 ? 1 : 0), 0) ?? 0, [rows])

  // A panel chosen elsewhere comes into sight here.
  useEffect(() => {
    const element = box.current
    const at = selected < 0 ? -1 : order.indexOf(selected)
    if (element === null || at < 0) return
    const y = at * rowHeight
    if (y < element.scrollTop) element.scrollTop = y
    else if (y + rowHeight > element.scrollTop + element.clientHeight) element.scrollTop = y + rowHeight - element.clientHeight
  }, [selected, order])

  const onKey = (event: KeyboardEvent): void => {
    const at = order.indexOf(selected)
    const page = Math.max(1, Math.floor(height / rowHeight) - 1)
    const to = ({ ArrowDown: at + 1, ArrowUp: at - 1, PageDown: at + page, PageUp: at - page, Home: 0, End: order.length - 1 } as Record<string, number>)[event.key]
    if (to === undefined || order.length === 0) return
    event.preventDefault()
    desk.select({ kind: 'panel', index: order[Math.max(0, Math.min(order.length - 1, to))] })
  }
  const first = Math.max(0, Math.floor(top / rowHeight) - 5)
  const last = Math.min(order.length, first + Math.ceil(height / rowHeight) + 11)
  const shown = Array.from(order.subarray(first, last))
  const filters: readonly (readonly [ListFilter, string])[] = [['all', 'all'], ['flagged', `${figure(flagged)} flagged`], ['group', 'its group']]
  return (
    <div className="panels">
      <header>
        <h2>Panels</h2>
        <span className="note">{answer === null ? '' : `${filter === 'all' ? 'all ' : ''}${figure(order.length)}, ${sortedBy[sort.by][sort.down ? 1 : 0]}`}</span>
      </header>
      <div className="row columns" role="row">
        {columns.map(([by, title, unit]) => (
          <button key={by} className={`cell ${by}`} role="columnheader" aria-sort={sort.by === by ? (sort.down ? 'descending' : 'ascending') : 'none'}
            onClick={() => desk.set({ sort: { by, down: sort.by === by ? !sort.down : by === 'corner' || by === 'flat' } })}>{title}<br />{unit}{sort.by === by ? (sort.down ? ' \u2193' : ' \u2191') : ''}</button>
        ))}
        <span className="cell flag">note</span>
      </div>
      <div ref={box} className="rows" role="grid" aria-label="Panels" aria-rowcount={order.length} tabIndex={0} data-first onKeyDown={onKey} onScroll={(event) => setTop(event.currentTarget.scrollTop)}
        aria-activedescendant={selected >= 0 ? `row-${selected}` : undefined}>
        <div style={{ height: order.length * rowHeight, position: 'relative' }}>
          {rows !== null && shown.map((p, k) => (
            <div key={p} id={`row-${p}`} role="row" aria-rowindex={first + k + 1} aria-selected={p === selected} className={p === selected ? 'row chosen' : 'row'} style={{ top: (first + k) * rowHeight }} onClick={() => desk.select({ kind: 'panel', index: p })}>
              <span className="cell panel" role="gridcell">{panelName(p)}</span>
              <span className="cell area" role="gridcell">{figure(rows.area[p], 2)}</span>
              <span className="cell slope" role="gridcell">{answer?.roof === null ? '\u2013' : figure(rows.slope[p], 1)}</span>
              <span className="cell fall" role="gridcell">{answer?.roof === null || Number.isNaN(rows.fall[p]) ? '\u2013' : compassPoint(rows.fall[p])}</span>
              <span className="cell corner" role="gridcell">{answer?.roof === null ? '\u2013' : hundredths(rows.corner[p])}</span>
              <span className="cell flat" role="gridcell">{answer?.roof === null ? '\u2013' : hundredths(rows.flat[p])}</span>
              <span className="cell flag" role="gridcell">{flagWords(rows.flag[p], rows.flat[p] - flat_mm)}</span>
            </div>
          ))}
        </div>
      </div>
      <footer>
        <span className="switch" role="radiogroup" aria-label="Show">
          <span aria-hidden="true">Show</span>
          {filters.map(([name, title]) => (
            <button key={name} role="radio" aria-checked={filter === name} className={filter === name ? 'chosen' : ''} onClick={() => desk.set({ filter: name })}>{title}</button>
          ))}
        </span>
        <span>{rows === null ? '' : `${figure(rows.totalArea, 2)} m\u00b2`}</span>
      </footer>
    </div>
  )
}

function flagWords(flag: number, over: number) {
  if (flag === 0) return null
  return (
    <>
      {(flag & 1) === 1 && <span title="under the least slope"><svg width={flag === 3 ? 11 : 22} height="9" aria-hidden="true"><path d={flag === 3 ? 'M1 2h6M3 7h6' : 'M1 2h8M12 2h8M5 7h8'} /></svg><span className="unseen">under the least slope</span></span>}
      {(flag & 2) === 2 && <b>+{figure(over, over < 9.95 ? 1 : 0)}</b>}
    </>
  )
}
