/** A place in an input: keys and indices from the root. */
export type Path = readonly (string | number)[]

export function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value)
}

/** Every place below a value that satisfies a condition. */
export function placesWhere(
  value: unknown,
  wanted: (value: unknown, path: Path) => boolean,
  at: Path = [],
): Path[] {
  const below =
    typeof value === 'object' && value !== null
      ? Object.entries(value).flatMap(([key, item]) =>
          placesWhere(item, wanted, [...at, Array.isArray(value) ? Number(key) : key]),
        )
      : []
  return wanted(value, at) ? [at, ...below] : below
}

/** What stands at a place. */
export function valueAt(value: unknown, path: Path): unknown {
  return path.reduce<unknown>(
    (inside, key) => (inside as Record<string | number, unknown> | undefined)?.[key],
    value,
  )
}

/** A copy with the value at a place changed by a function; `undefined` takes a key away. */
export function changedAt<T>(value: T, path: Path, change: (old: unknown) => unknown): T {
  const [key, ...rest] = path
  if (key === undefined) return change(value) as T
  const copy = (Array.isArray(value) ? [...value] : { ...value }) as Record<string | number, unknown>
  const next = changedAt(copy[key], rest, change)
  if (next === undefined && !Array.isArray(value)) Reflect.deleteProperty(copy, key)
  else copy[key] = next
  return copy as T
}
