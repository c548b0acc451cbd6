interface Named {
  id: string
  name: string
}

/** First names where they tell people apart, whole names where they do not. */
export const shortNames = (people: readonly Named[]): ReadonlyMap<string, string> => {
  const names = new Map(people.map(({ id, name }) => [id, name]))
  const first = (name: string): string => name.trim().split(/\s+/)[0] ?? name
  const bearers = (short: string): number => [...names.values()].filter((name) => first(name) === short).length
  return new Map([...names].map(([id, name]) => [id, bearers(first(name)) === 1 ? first(name) : name]))
}
