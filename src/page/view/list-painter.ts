/** Paints a display list on a canvas. One path a batch, so that 10,000 panels cost a dozen fills. */
import type { DisplayList, Item } from '../../paper/drawing/display-list.ts'
import { faces, lineStyles, type Theme } from '../../paper/drawing/theme.ts'

/** `ratio`: device pixels to a sheet pixel. The canvas is taken to be as large as the list times the ratio. */
export function paintList(context: CanvasRenderingContext2D, list: DisplayList, theme: Theme, ratio: number): void {
  context.setTransform(ratio, 0, 0, ratio, 0, 0)
  context.fillStyle = theme.paper
  context.fillRect(0, 0, list.width, list.height)
  context.lineJoin = 'round'
  for (const item of list.items) paintItem(context, item, theme)
}

function paintItem(context: CanvasRenderingContext2D, item: Item, theme: Theme): void {
  switch (item.kind) {
    case 'fills':
      context.globalAlpha = item.opacity
      context.fillStyle = theme[item.tone]
      context.beginPath()
      trace(context, item.points, item.start, true)
      context.fill()
      context.globalAlpha = 1
      return
    case 'strokes': {
      const style = lineStyles[item.line]
      context.strokeStyle = theme[style.tone]
      context.lineWidth = item.width ?? style.width
      context.lineCap = style.cap
      context.setLineDash(style.dash as number[])
      context.beginPath()
      trace(context, item.points, item.start, item.closed)
      context.stroke()
      if (style.dash.length > 0) context.setLineDash([])
      return
    }
    case 'dots': {
      context.beginPath()
      const { points, radius } = item
      if (radius <= 1.5 && item.line === null) {
        // A disc this small is a square to the eye and four times as fast.
        for (let i = 0; i < points.length; i += 2) context.rect(points[i] - radius, points[i + 1] - radius, 2 * radius, 2 * radius)
      } else {
        for (let i = 0; i < points.length; i += 2) {
          context.moveTo(points[i] + radius, points[i + 1])
          context.arc(points[i], points[i + 1], radius, 0, 2 * Math.PI)
        }
      }
      if (item.fill !== null) {
        context.fillStyle = theme[item.fill]
        context.fill()
      }
      if (item.line !== null && item.lineWidth > 0) {
        context.strokeStyle = theme[item.line]
        context.lineWidth = item.lineWidth
        context.stroke()
      }
      return
    }
    case 'label': {
      context.font = `${item.bold ? '600' : '400'} ${item.size}px ${faces[item.face]}`
      context.textAlign = item.anchor === 'middle' ? 'center' : item.anchor === 'end' ? 'right' : 'left'
      if (item.plate) {
        context.strokeStyle = theme.paper
        context.lineWidth = 4
        context.strokeText(item.text, item.x, item.y)
      }
      context.fillStyle = theme[item.tone]
      context.fillText(item.text, item.x, item.y)
    }
  }
}

function trace(context: CanvasRenderingContext2D, points: Float64Array, start: Int32Array, closed: boolean): void {
  for (let i = 0; i + 1 < start.length; i += 1) {
    const from = start[i]
    context.moveTo(points[2 * from], points[2 * from + 1])
    for (let k = from + 1; k < start[i + 1]; k += 1) context.lineTo(points[2 * k], points[2 * k + 1])
    if (closed) context.closePath()
  }
}
