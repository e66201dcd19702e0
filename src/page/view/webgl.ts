/**
 * Whether this browser draws with WebGL, asked before three is: three throws where it is absent, and the whole page would
 * go blank. Software WebGL is told apart, since it is slower than it says.
 */
export type WebGlKind = 'none' | 'software' | 'hardware'

export function webGlKind(): WebGlKind {
  try {
    const context = document.createElement('canvas').getContext('webgl2')
    if (context === null) return 'none'
    const info = context.getExtension('WEBGL_debug_renderer_info')
    const name = String(context.getParameter(info === null ? context.RENDERER : info.UNMASKED_RENDERER_WEBGL))
    // The probe's context is given back: browsers allow a page only a few.
    context.getExtension('WEBGL_lose_context')?.loseContext()
    return /swiftshader|llvmpipe|software|basic render/i.test(name) ? 'software' : 'hardware'
  } catch {
    return 'none'
  }
}
