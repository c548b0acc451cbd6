/** Numbers whose digits stand in cells of equal width: bar numbers, times, counts in a column. */
export function Figures({ children }: { children: string | number }) {
  return <span className="font-figures">{children}</span>
}
