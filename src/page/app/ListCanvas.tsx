/**
 * A canvas that shows a display list and follows its size. Painting waits for its turn, so that several changes before it
 * are painted once. The words of the drawing stand beside it for those who do not see it.
 */
import { useEffect, useRef, useState, type KeyboardEvent, type PointerEvent } from 'react'
import type { DisplayList } from '../../paper/drawing/display-list.ts'
import { themes } from '../../paper/drawing/theme.ts'
import { paintList } from '../view/list-painter.ts'
import { leaveTurn, paintInTurn } from '../view/turns.ts'
import { useDeskState } from './context.ts'
import { useSize } from './useSize.ts'

export interface ListCanvasProps {
  readonly draw: (width: number, height: number) => DisplayList | null
  readonly label: string
  readonly faded?: boolean
  readonly cursor?: string
  readonly onWheel?: (factor: number, x: number, y: number) => void
  readonly onDown?: (event: PointerEvent<HTMLCanvasElement>, x: number, y: number) => void
  readonly onMove?: (event: PointerEvent<HTMLCanvasElement>, x: number, y: number) => void
  readonly onUp?: (event: PointerEvent<HTMLCanvasElement>, x: number, y: number) => void
  readonly onKey?: (event: KeyboardEvent) => void
}

export function ListCanvas(props: ListCanvasProps) {
  const { draw, label, onWheel, onDown, onMove, onUp, onKey } = props
  const box = useRef<HTMLDivElement>(null)
  const canvas = useRef<HTMLCanvasElement>(null)
  const { width, height } = useSize(box)
  const theme = useDeskState((state) => state.theme)

  // Letters painted before their face has come are painted again with it.
  const [faces, setFaces] = useState(0)
  useEffect(() => {
    const come = (): void => setFaces((count) => count + 1)
    document.fonts.addEventListener('loadingdone', come)
    return () => document.fonts.removeEventListener('loadingdone', come)
  }, [])

  useEffect(() => {
    const element = canvas.current
    if (element === null || width === 0 || height === 0) return
    paintInTurn(element, () => {
      const context = element.getContext('2d')
      const list = draw(width, height)
      if (context === null) return
      const ratio = Math.min(2, window.devicePixelRatio || 1)
      const w = Math.round(width * ratio)
      const h = Math.round(height * ratio)
      if (element.width !== w) element.width = w
      if (element.height !== h) element.height = h
      if (list === null) {
        context.setTransform(1, 0, 0, 1, 0, 0)
        context.clearRect(0, 0, w, h)
      } else paintList(context, list, themes[theme], ratio)
    })
  }, [draw, width, height, theme, faces])
  useEffect(() => {
    const element = canvas.current
    return () => { if (element !== null) leaveTurn(element) }
  }, [])

  // React attaches wheel listeners passively; zooming must keep the page from scrolling.
  useEffect(() => {
    const element = canvas.current
    if (element === null || onWheel === undefined) return
    const listen = (event: WheelEvent): void => {
      event.preventDefault()
      onWheel(Math.exp(-event.deltaY * (event.ctrlKey ? 0.01 : 0.0015)), event.offsetX, event.offsetY)
    }
    element.addEventListener('wheel', listen, { passive: false })
    return () => element.removeEventListener('wheel', listen)
  }, [onWheel])

  const at = (event: PointerEvent<HTMLCanvasElement>): readonly [number, number] => {
    const rect = event.currentTarget.getBoundingClientRect()
    return [event.clientX - rect.left, event.clientY - rect.top]
  }
  return (
    <div ref={box} className={props.faded === true ? 'drawing faded' : 'drawing'}>
      <canvas
        ref={canvas} role="img" aria-label={label} tabIndex={0} data-first style={{ cursor: props.cursor }}
        onPointerDown={(event) => onDown?.(event, ...at(event))}
        onPointerMove={(event) => onMove?.(event, ...at(event))}
        onPointerUp={(event) => onUp?.(event, ...at(event))}
        onPointerCancel={(event) => onUp?.(event, ...at(event))}
        onKeyDown={onKey}
      />
    </div>
  )
}
