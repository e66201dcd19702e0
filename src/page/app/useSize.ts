/** The size of an element in CSS pixels, followed. */
import { useEffect, useState, type RefObject } from 'react'

export interface Size {
  readonly width: number
  readonly height: number
}

export function useSize(ref: RefObject<HTMLElement | null>): Size {
  const [size, setSize] = useState<Size>({ width: 0, height: 0 })
  useEffect(() => {
    const element = ref.current
    if (element === null) return
    const measure = (): void => {
      const { clientWidth, clientHeight } = element
      setSize((old) => (old.width === clientWidth && old.height === clientHeight ? old : { width: clientWidth, height: clientHeight }))
    }
    measure()
    const observer = new ResizeObserver(measure)
    observer.observe(element)
    return () => observer.disconnect()
  }, [ref])
  return size
}
