/**
 * Room for the numbers of a factor, with the kernels that work on it: the binary ones on WebAssembly memory where
 * that is allowed and worth it, else the plain ones. Both give the same numbers.
 */
import { kernelBinary } from './kernel-binary.ts'
import { plainKernels, type Kernels } from './kernel.ts'

export interface Store extends Kernels {
  readonly data: Float64Array
}

const pageBytes = 65536
const mostPages = 65535

let compiled: WebAssembly.Module | null | undefined

/** The module, or null where the engine or the page's security policy does not allow it. */
function kernelModule(): WebAssembly.Module | null {
  if (compiled === undefined) {
    try {
      compiled = new WebAssembly.Module(kernelBinary())
    } catch {
      compiled = null
    }
  }
  return compiled
}

/** Room for `numbers` zeros, with the binary kernels if asked for and possible. */
export function newStore(numbers: number, binary: boolean): Store {
  const pages = Math.ceil((8 * numbers) / pageBytes)
  const code = binary && pages <= mostPages ? kernelModule() : null
  if (code !== null) {
    try {
      const memory = new WebAssembly.Memory({ initial: pages })
      const instance = new WebAssembly.Instance(code, { room: { memory } })
      const { update, mirror } = instance.exports as unknown as Kernels
      return { data: new Float64Array(memory.buffer, 0, numbers), update, mirror }
    } catch {
      // Engines limit how many memories live at once; ordinary memory serves as well.
    }
  }
  const data = new Float64Array(numbers)
  return { data, ...plainKernels(data) }
}
