/** The whole job asked as from outside: a file's text, a brief and options in; the answer and the files' texts out. */
import { sentence } from '../../src/base/result.ts'
import type { Checked } from '../../src/job/check.ts'
import { files } from '../../src/job/files.ts'
import { run } from '../../src/job/run.ts'
import { noOptions, type Options } from '../../src/plan/project/options.ts'
import type { Points } from './plans.ts'

export interface Question {
  readonly name?: string
  readonly text: string
  /** A record, written as JSON, or the text itself. */
  readonly brief?: object | string | null
  readonly options?: Partial<Options>
}

/** The answer; throws with the problem's sentence where the job refuses. */
export async function ask({ name = 'plan.obj', text, brief = null, options = {} }: Question): Promise<Checked> {
  const briefText = brief === null ? null : typeof brief === 'string' ? brief : JSON.stringify({ panewise: 'brief', version: 1, ...brief })
  const answer = await run({
    command: 'raise',
    source: { name, bytes: new TextEncoder().encode(text) },
    options: { ...noOptions, ...options },
    brief: briefText === null ? null : { name: 'plan.brief.json', text: briefText },
    levels: null,
    given: {},
  })
  if (!answer.ok) throw new Error(sentence(answer.problem))
  return answer.value
}

/** Texts of the written files by name. */
export async function written(checked: Checked): Promise<Record<string, string>> {
  const made = await files(checked)
  if (!made.ok) throw new Error(sentence(made.problem))
  return Object.fromEntries(made.value.map(({ name, bytes }) => [name, new TextDecoder().decode(bytes)]))
}

/** A plan as the plainest OBJ: faces 0-based in, heights only where given; `unit` as a comment the reader knows. */
export function objText(points: Points, faces: readonly (readonly number[])[], heights: ArrayLike<number> | null = null): string {
  const nodes = points.map(([x, y], k) => `v ${x} ${y} ${heights === null ? 0 : heights[k]}`)
  return `${[...nodes, ...faces.map((face) => `f ${face.map((k) => k + 1).join(' ')}`)].join('\n')}\n`
}
