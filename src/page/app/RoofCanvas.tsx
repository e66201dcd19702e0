/**
 * Drawing 3 as a three.js scene, by WebGL where there is one and by the canvas painter where not. Rendered only when
 * something changed, in turn with the other drawings: a page that renders all the time on a software WebGL starves the worker.
 */
import { Canvas, useFrame, useThree } from '@react-three/fiber'
import { Component, useCallback, useEffect, useMemo, useRef, useState, type ReactNode } from 'react'
import { MOUSE, TOUCH, WebGLRenderer, type Group, type OrthographicCamera, type PerspectiveCamera } from 'three'
import { OrbitControls } from 'three/examples/jsm/controls/OrbitControls.js'
import { metres } from '../../base/length.ts'
import { fitted } from '../../paper/drawing/plan-window.ts'
import { planArea } from '../../paper/drawing/plan-drawing.ts'
import { stockView, type Side } from '../../paper/drawing/projection.ts'
import { themes } from '../../paper/drawing/theme.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { cameraFor } from '../view/cameras.ts'
import { PaperRenderer } from '../view/paper-renderer.ts'
import { roofMaterials } from '../view/roof-materials.ts'
import { roofScene, type RoofScene } from '../view/roof-scene.ts'
import { leaveTurn, paintInTurn } from '../view/turns.ts'
import { useDesk, useDeskState } from './context.ts'
import { useReading } from './useReading.ts'
import type { OnCamera } from './RoofHand.tsx'
import type { Size } from './useSize.ts'

/**
 * Up to this many panels the painter draws where WebGL is software: it takes as long a frame, smooths its edges, and spares the
 * 300 to 600 ms for which the first frame of a software WebGL holds the page up. Above, WebGL turns faster; multisampling is
 * left out, since it costs 70 of 100 ms a frame.
 */
const manyPanels = 2500

/** Canvases tried for a context that is not lost, before the painter takes over. */
const mostTries = 5

/** Height in px of the words under the roof. */
const footRoom = 26

export function RoofCanvas({ answer, size, planSize, onCamera }: { readonly answer: Answer; readonly size: Size; readonly planSize: Size; readonly onCamera: OnCamera }) {
  const webgl = useDeskState((state) => state.webgl)
  const [lost, setLost] = useState(0)
  const [failed, setFailed] = useState(false)
  const tries = useRef(0)
  const without = webgl === 'none' || failed
  const painter = without || (webgl === 'software' && answer.plan.panelCount <= manyPanels)
  const smooth = webgl === 'hardware'
  if (size.width === 0 || size.height === 0) return null
  /**
   * A browser short of contexts gives one that is lost from the start, on which three throws: a fresh canvas is tried again
   * shortly, a few times, then the painter takes over. Meanwhile a painter of nothing visible stands in.
   */
  const withWebGl = (canvas: HTMLCanvasElement): WebGLRenderer | PaperRenderer => {
    const options: WebGLContextAttributes = { antialias: smooth, alpha: true, powerPreference: 'low-power' }
    const context = canvas.getContext('webgl2', options) as WebGL2RenderingContext | null
    if (context !== null && !context.isContextLost()) {
      tries.current = 0
      const renderer = new WebGLRenderer({ ...options, canvas, context })
      // The shaders are three's own: asking whether they are right waits for the compiler.
      renderer.debug.checkShaderErrors = false
      return renderer
    }
    tries.current += 1
    setTimeout(() => (tries.current > mostTries ? setFailed(true) : setLost((count) => count + 1)), 300)
    return new PaperRenderer(document.createElement('canvas'))
  }
  const paint = (
    <Canvas
      key={`${painter ? 'paper' : 'webgl'} ${smooth} ${lost}`} frameloop="never" flat dpr={webgl === 'hardware' ? [1, 2] : 1} orthographic
      gl={(props) => (painter ? new PaperRenderer(props.canvas as HTMLCanvasElement) : withWebGl(props.canvas as HTMLCanvasElement)) as never}
      onCreated={({ gl }) => {
        gl.domElement.addEventListener('webglcontextlost', (event) => {
          event.preventDefault()
          // A fresh canvas gets a fresh context; if that fails too the boundary turns to the painter.
          setTimeout(() => setLost((count) => count + 1), 50)
        }, { once: true })
      }}
    >
      <Scene answer={answer} size={size} planSize={planSize} onCamera={onCamera} />
    </Canvas>
  )
  return (
    <>
      <Boundary key={String(painter)} onFail={() => setFailed(true)}>{paint}</Boundary>
      {without && <p className="foot last"><span>Drawn without WebGL; same figures, turns more slowly.</span></p>}
    </>
  )
}

/** If WebGL fails in mid-flight React would take the whole page down with it. */
class Boundary extends Component<{ readonly onFail: () => void; readonly children: ReactNode }, { failed: boolean }> {
  override state = { failed: false }
  static getDerivedStateFromError(): { failed: boolean } {
    return { failed: true }
  }
  override componentDidCatch(): void {
    this.props.onFail()
  }
  override render(): ReactNode {
    return this.state.failed ? null : this.props.children
  }
}

/** Width in px that the rise takes beside the roof. */
const riseRoom = 66

/** Scale of the plan beside: parallel views share it. */
export function roofScale(answer: Answer, size: Size, planSize: Size): { scale: number; shift: number } {
  const onPlan = planSize.width > 0 && planSize.height > 0
  const area = onPlan ? planArea(planSize.width, planSize.height, true) : planArea(size.width, size.height, false)
  const window = fitted(answer.plan, area)
  const fits = onPlan && size.width === planSize.width
  const scale = Math.min(window.scale, ((size.width - (onPlan ? 0.06 * size.width : 2 * riseRoom)) * window.scale) / Math.max(1, area.right - area.left), (1.45 * (size.height - 66)) / Math.max(1, planHeight(answer)))
  return { scale: fits && scale >= window.scale * 0.8 ? window.scale : scale, shift: fits ? window.middleX - size.width / 2 : 0 }
}

function planHeight(answer: Answer): number {
  let low = Infinity
  let high = -Infinity
  for (const y of answer.plan.y) {
    if (y < low) low = y
    if (y > high) high = y
  }
  return high - low
}

function Scene({ answer, size, planSize, onCamera }: { readonly answer: Answer; readonly size: Size; readonly planSize: Size; readonly onCamera: OnCamera }) {
  const desk = useDesk()
  const themeName = useDeskState((state) => state.theme)
  const side = useDeskState((state) => state.side)
  const exaggeration = useDeskState((state) => state.exaggeration)
  const selection = useDeskState((state) => state.selection)
  const views = useDeskState((state) => state.views)
  const made = useReading(answer)
  const { scale, shift } = useMemo(() => roofScale(answer, size, planSize), [answer.plan, size, planSize])
  const selectedPanel = selection?.kind === 'panel' ? selection.index : -1
  const theme = themes[themeName]
  const materials = useMemo(() => roofMaterials(theme), [theme])
  useEffect(() => () => materials.dispose(), [materials])
  const holder = useRef<Group>(null)
  const scene = useRef<RoofScene | null>(null)
  const paint = usePainting()
  const before = useDeskState((state) => (state.inHand === null ? null : state.before))
  const beforeHeights = before !== null && before.plan === answer.plan ? (before.roof?.heights ?? null) : null
  const notes = useRef({ selectedPanel, beforeHeights })
  useEffect(() => {
    notes.current = { selectedPanel, beforeHeights }
    scene.current?.select(selectedPanel)
    scene.current?.showBefore(beforeHeights)
    paint()
  }, [selectedPanel, beforeHeights, paint])
  // Objects are made in a turn of their own, and painted in the next.
  useEffect(() => {
    paintInTurn(holder, () => {
      const next = made === null ? null : roofScene(answer, { ...made, theme, materials, exaggeration, scale })
      holder.current?.clear()
      scene.current?.dispose()
      scene.current = next
      if (next !== null) {
        next.select(notes.current.selectedPanel)
        next.showBefore(notes.current.beforeHeights)
        holder.current?.add(next.group)
      }
      paint()
    })
  }, [answer, made, theme, materials, exaggeration, scale, paint])
  useEffect(() => () => {
    leaveTurn(holder)
    scene.current?.dispose()
  }, [])
  useFrame(({ camera }) => {
    scene.current?.face(camera, size.height)
    onCamera.current?.(camera)
  })
  const down = useRef<readonly [number, number]>([0, 0])
  return (
    <>
      <View key={views} answer={answer} side={side} size={size} scale={scale} shift={shift} top={roofTop(answer, exaggeration)} exaggeration={exaggeration} />
      <group
        ref={holder}
        onPointerDown={(event) => { down.current = [event.clientX, event.clientY] }}
        onClick={(event) => {
          if (scene.current === null || Math.hypot(event.clientX - down.current[0], event.clientY - down.current[1]) > 4) return
          if (event.object !== scene.current.faces || event.faceIndex === undefined || event.faceIndex === null) return
          event.stopPropagation()
          desk.select({ kind: 'panel', index: scene.current.panelOfTriangle[event.faceIndex] })
        }}
      />
    </>
  )
}

/** Paints the scene when its turn comes; also when the canvas has another size, which empties it. */
function usePainting(): () => void {
  const advance = useThree((three) => three.advance)
  const gl = useThree((three) => three.gl)
  const canvasSize = useThree((three) => three.size)
  const paint = useCallback(() => paintInTurn(gl, () => advance(performance.now(), false)), [advance, gl])
  useEffect(paint, [paint, canvasSize])
  useEffect(() => () => leaveTurn(gl), [gl])
  return paint
}

/** Height of the highest node over the lowest, as drawn. */
function roofTop({ roof }: Answer, exaggeration: number): number {
  let low = Infinity
  let high = -Infinity
  for (const z of roof?.heights ?? []) {
    if (z < low) low = z
    if (z > high) high = z
  }
  return high > low ? (high - low) * exaggeration : 0
}

function View({ answer, side, size, scale, shift, top, exaggeration }: {
  readonly answer: Answer; readonly side: Side; readonly size: Size; readonly scale: number; readonly shift: number; readonly top: number; readonly exaggeration: number
}) {
  const desk = useDesk()
  const set = useThree((three) => three.set)
  const gl = useThree((three) => three.gl)
  const paint = usePainting()
  const { plan } = answer
  const topKept = useRef(top)
  topKept.current = top
  useEffect(() => {
    // The eye of a person of 1.65 m who stands outside, a storey below the springing.
    const eye = (1.65 - 3) / metres[plan.unit]
    const { camera, target } = cameraFor(stockView(side, eye), { span: plan.frame.span, top: topKept.current, scale, width: size.width, height: size.height })
    const manual = camera as (OrthographicCamera | PerspectiveCamera) & { manual?: boolean }
    manual.manual = true
    // Moved on the screen, whatever the zoom, so that the roof stands under its plan.
    if ('isOrthographicCamera' in camera) camera.setViewOffset(size.width, size.height, -shift, footRoom / 2, size.width, size.height)
    set({ camera: camera as never })
    const controls = new OrbitControls(camera, gl.domElement)
    controls.target.copy(target)
    controls.enableDamping = false
    controls.minZoom = scale / 4
    controls.maxZoom = scale * 60
    controls.maxPolarAngle = Math.PI * 0.52
    controls.mouseButtons = { LEFT: MOUSE.ROTATE, MIDDLE: MOUSE.PAN, RIGHT: MOUSE.PAN }
    controls.touches = { ONE: TOUCH.ROTATE, TWO: TOUCH.DOLLY_PAN }
    controls.update()
    let moved = false
    const onStart = (): void => { moved = false }
    const onChange = (): void => {
      moved = true
      paint()
    }
    controls.addEventListener('change', onChange)
    controls.addEventListener('start', onStart)
    // A click that turns nothing leaves the stock view in force.
    const onEnd = (): void => { if (moved) desk.set({ turned: turnedWords(controls.getAzimuthalAngle(), controls.getPolarAngle()) }) }
    controls.addEventListener('end', onEnd)
    paint()
    return () => {
      controls.removeEventListener('change', onChange)
      controls.removeEventListener('end', onEnd)
      controls.removeEventListener('start', onStart)
      controls.dispose()
    }
  }, [plan, side, size.width, size.height, scale, shift, exaggeration, set, gl, paint, desk])
  return null
}

/** three's azimuth is 0 for a viewer in the south and grows eastwards when z is up; its polar angle is from the zenith. */
function turnedWords(azimuth: number, polar: number): string {
  const east = Math.round((azimuth * 180) / Math.PI)
  const above = Math.round(90 - (polar * 180) / Math.PI)
  const where = Math.abs(east) < 1 ? 'from the south' : `${Math.abs(east)}° ${east > 0 ? 'east' : 'west'} of south`
  return `${where}, ${above}° above`
}
