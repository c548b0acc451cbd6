/** Where a floating box goes: under its anchor, or above if there is no room; never outside the window (8 px margin). */
export function placeBeside(
  anchor: { left: number; right: number; top: number; bottom: number },
  box: { width: number; height: number },
  view: { width: number; height: number },
  align: 'start' | 'end'
): { left: number; top: number } {
  const margin = 8
  const gap = 4
  const wantedLeft = align === 'start' ? anchor.left : anchor.right - box.width
  const left = Math.max(margin, Math.min(wantedLeft, view.width - box.width - margin))
  const below = anchor.bottom + gap
  const fitsBelow = below + box.height <= view.height - margin
  const top = fitsBelow ? below : Math.max(margin, anchor.top - gap - box.height)
  return { left, top }
}
