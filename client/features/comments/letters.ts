/** `a` … `z`, `aa` …: the small letter of a comment, by the order in which they were said, so that it stays the same. */
export const letterAt = (index: number): string =>
  index < 26 ? String.fromCharCode(97 + index) : letterAt(Math.floor(index / 26) - 1) + letterAt(index % 26)

interface Said {
  id: string
  createdAt: string
}

/** Letters of all comments of a take by id. */
export const lettersOf = (comments: readonly Said[]): ReadonlyMap<string, string> => {
  const inTime = [...comments].sort(
    (a, b) => Date.parse(a.createdAt) - Date.parse(b.createdAt) || (a.id < b.id ? -1 : 1)
  )
  return new Map(inTime.map(({ id }, index) => [id, letterAt(index)]))
}
