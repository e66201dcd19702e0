/**
 * Whether a value is valid against a JSON Schema: the keywords that our schemas use, as draft 2020-12 (core and validation)
 * defines them, and nothing for people. It shares no code with the check it judges, and refuses keywords it does not know.
 */
type Node = Record<string, unknown>

const annotations = ['$schema', '$defs', 'title', 'description']

export function valid(schema: Node, value: unknown, root: Node = schema): boolean {
  return Object.entries(schema).every(([keyword, setting]) => {
    if (annotations.includes(keyword)) return true
    const rule = rules[keyword]
    if (rule === undefined) throw new Error(`keyword ${keyword}`)
    return rule(setting, value, schema, root)
  })
}

const object = (value: unknown): value is Node => typeof value === 'object' && value !== null && !Array.isArray(value)

const rules: Record<string, (setting: unknown, value: unknown, schema: Node, root: Node) => boolean> = {
  $ref: (to, value, _, root) => valid((to as string).slice(2).split('/').reduce((at: Node, key) => at[key] as Node, root), value, root),
  type: (type, value) => (type === 'object' ? object(value) : type === 'array' ? Array.isArray(value) : typeof value === type),
  const: (only, value) => value === only,
  enum: (list, value) => (list as unknown[]).includes(value),
  oneOf: (branches, value, _, root) => (branches as Node[]).filter((branch) => valid(branch, value, root)).length === 1,
  properties: (fields, value, _, root) =>
    !object(value) || Object.entries(fields as Record<string, Node>).every(([name, field]) => !Object.hasOwn(value, name) || valid(field, value[name], root)),
  required: (names, value) => !object(value) || (names as string[]).every((name) => Object.hasOwn(value, name)),
  additionalProperties: (_, value, schema) => !object(value) || Object.keys(value).every((name) => Object.hasOwn(schema.properties as Node, name)),
  items: (item, value, _, root) => !Array.isArray(value) || value.every((entry) => valid(item as Node, entry, root)),
  minItems: (count, value) => !Array.isArray(value) || value.length >= (count as number),
  maxItems: (count, value) => !Array.isArray(value) || value.length <= (count as number),
  minLength: (count, value) => typeof value !== 'string' || [...value].length >= (count as number),
  maxLength: (count, value) => typeof value !== 'string' || [...value].length <= (count as number),
  pattern: (pattern, value) => typeof value !== 'string' || new RegExp(pattern as string, 'u').test(value),
  minimum: (bound, value) => typeof value !== 'number' || value >= (bound as number),
  maximum: (bound, value) => typeof value !== 'number' || value <= (bound as number),
  exclusiveMinimum: (bound, value) => typeof value !== 'number' || value > (bound as number),
  exclusiveMaximum: (bound, value) => typeof value !== 'number' || value < (bound as number),
}
