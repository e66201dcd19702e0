/** The engine behind the page: the worker, told of each plan once and of each brief anew. */
import type { Result } from '../../base/result.ts'
import type { Progress } from '../../base/steps.ts'
import { noOptions } from '../../plan/project/options.ts'
import type { ReadPlan } from '../../plan/read-plan.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { WorkerClient, type Port } from '../../job/worker/client.ts'
import type { DrawingRead, Engine, NamedBytes } from './engine.ts'
import type { Doc, OpeningOptions } from './state.ts'

export class WorkerEngine implements Engine {
  private readonly client = new WorkerClient(() => new Worker(new URL('../../job/worker/worker.ts', import.meta.url), { type: 'module' }) as unknown as Port)
  private told: { read: ReadPlan; generation: number; number: number } | null = null
  private plans = 0

  async read(file: NamedBytes, options: OpeningOptions, onProgress: (progress: Progress) => void): Promise<Result<DrawingRead> | null> {
    const { unit, scale, snap_mm, layers, voids, colours, lineTypes, window = null, inside = null, between = null, accept, leave } = options
    const request = {
      command: 'read', source: file, brief: null, levels: null, given: {},
      options: { ...noOptions, unit, scale, snap_mm, layers, voids, colours, lineTypes, window, inside, between, accept, leave },
    } as const
    const result = await this.client.ask('read', request, true, onProgress)
    if (result === null || !result.ok) return result
    const { readPlan, layers: found, summary: { input } } = result.value
    return { ok: true, value: { read: readPlan, layers: found, sha256: input.sha256 === '' ? null : input.sha256 } }
  }

  async answer(doc: Doc, onProgress: (progress: Progress) => void): Promise<Result<Omit<Answer, 'plan'>> | null> {
    const plan = this.base(doc)
    return this.client.ask('answer', { plan, brief: doc.brief, options: noOptions, target: doc.target }, true, onProgress)
  }

  ways(doc: Doc, count: number): ReturnType<Engine['ways']> {
    return this.client.ask('ways', { plan: this.base(doc), count }, true)
  }

  whyFrozen(doc: Doc, joint: number): ReturnType<Engine['whyFrozen']> {
    return this.client.ask('frozen', { plan: this.base(doc), joint }, true)
  }

  releases(doc: Doc): ReturnType<Engine['releases']> {
    return this.client.ask('releases', { plan: this.base(doc) }, true)
  }

  cures(doc: Doc, onProgress: (progress: Progress) => void): ReturnType<Engine['cures']> {
    return this.client.ask('cures', { plan: this.base(doc) }, true, onProgress)
  }

  applied(doc: Doc, { code, name }: Parameters<Engine['applied']>[1]): ReturnType<Engine['applied']> {
    return this.client.ask('applied', { plan: this.base(doc), cure: { code, name } }, false)
  }

  oneWay(doc: Doc, joints: 'all' | readonly string[], onProgress: (progress: Progress) => void): ReturnType<Engine['oneWay']> {
    return this.client.ask('oneWay', { plan: this.base(doc), joints }, true, onProgress)
  }

  balance(doc: Doc, densities: Parameters<Engine['balance']>[1], onProgress: (progress: Progress) => void): ReturnType<Engine['balance']> {
    return this.client.ask('balance', { plan: this.base(doc), brief: doc.brief, densities }, true, onProgress)
  }

  mirrors(doc: Doc): ReturnType<Engine['mirrors']> {
    return this.client.ask('mirrors', { plan: this.base(doc) }, true)
  }

  surface(doc: Doc, file: NamedBytes): ReturnType<Engine['surface']> {
    return this.client.ask('surface', { plan: this.base(doc), file }, true)
  }

  files(doc: Doc): ReturnType<Engine['files']> {
    return this.client.ask('files', { plan: this.base(doc), csv: 'comma' }, false)
  }

  stop(): void {
    this.client.stop()
  }

  close(): void {
    this.client.close()
  }

  /** Number of the document's plan with the worker, which is told of it first when it does not know it. */
  private base(doc: Doc): number {
    if (this.told !== null && this.told.read === doc.read && this.told.generation === this.client.generation) return this.told.number
    this.plans += 1
    void this.client.ask('base', { plan: this.plans, read: doc.read, name: doc.name }, false).catch(() => {})
    this.told = { read: doc.read, generation: this.client.generation, number: this.plans }
    return this.plans
  }
}
