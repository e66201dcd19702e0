/**
 * A table by columns, without an object a cell: what lists are made as, what files are written from and what the page's
 * list shows. Every column has `rows` entries.
 */
export interface Table {
  readonly rows: number
  readonly columns: readonly Column[]
}

export type Column = NumberColumn | NameColumn | WordColumn | TextColumn

/** Numbers. NaN stands for "no value here" (an empty cell); infinities do not occur. */
export interface NumberColumn {
  readonly kind: 'number'
  readonly title: string
  readonly values: Float64Array | Int32Array
  /** How a number is written: the shortest digits that read back exactly, fixed decimals, or significant digits. */
  readonly digits: 'shortest' | { readonly decimals: number } | { readonly significant: number }
}

/** Names such as P1: a letter before the 1-based index. */
export interface NameColumn {
  readonly kind: 'name'
  readonly title: string
  readonly letter: string
  /** 0-based index of the thing named in each row. */
  readonly index: Int32Array
}

/** One of a few words. */
export interface WordColumn {
  readonly kind: 'word'
  readonly title: string
  readonly words: readonly string[]
  /** Index into `words` of each row. */
  readonly index: Uint8Array
}

/** Any text: for short tables. */
export interface TextColumn {
  readonly kind: 'text'
  readonly title: string
  readonly values: readonly string[]
}
