const ENDINGS: Record<number, string> = { 1: 'st', 2: 'nd', 3: 'rd' }

/** `1st`, `2nd`, `11th`, `22nd`. */
export function ordinal(count: number): string {
  const teen = count % 100 >= 11 && count % 100 <= 13
  return `${count}${(teen ? undefined : ENDINGS[count % 10]) ?? 'th'}`
}
