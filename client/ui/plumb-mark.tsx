/** The mark: a brass line with its bob. Decoration beside the name; give `label` where it stands alone. */
export function PlumbMark({ height = 30, label }: { height?: number; label?: string }) {
  return (
    <svg
      width={(height * 12) / 30}
      height={height}
      viewBox="0 0 12 30"
      role={label ? 'img' : undefined}
      aria-label={label}
      aria-hidden={label ? undefined : true}
      className="flex-none text-brass"
    >
      <path d="M6 0v20" stroke="currentColor" strokeWidth="1.5" fill="none" />
      <path d="M6 19.5 10.75 22.5 6 30 1.25 22.5z" fill="currentColor" />
    </svg>
  )
}
