// A member's own hatch pattern: lines at an angle, a spacing, single, crossed or broken, decided by their id alone.

export interface Hatch {
  /** One of eight directions, in degrees. */
  angle: number
  /** Distance of the lines on a box 24 wide. */
  spacing: number
  crossed: boolean
  broken: boolean
}

// FNV-1a, 32 bit (constants of the published algorithm, from memory): spreads ids that differ by one letter.
function hash(id: string): number {
  let value = 0x811c9dc5
  for (const char of id) {
    value ^= char.codePointAt(0) ?? 0
    value = Math.imul(value, 0x01000193)
  }
  return value >>> 0
}

const spacings = [2.75, 3.75, 5]

export function hatchOf(id: string): Hatch {
  const value = hash(id)
  const style = (value >>> 12) % 3
  return {
    angle: ((value >>> 3) % 8) * 22.5,
    spacing: spacings[(value >>> 7) % spacings.length] ?? 4,
    crossed: style === 1,
    broken: style === 2
  }
}

/** SVG path of the hatch on a box of `size`, lines running past its edges (clip it). */
export function hatchPath({ angle, spacing, crossed }: Hatch, size = 24): string {
  const reach = size * 0.75
  const middle = size / 2
  const at = (along: number, across: number, degrees: number) => {
    const turn = (degrees * Math.PI) / 180
    const x = middle + along * Math.cos(turn) - across * Math.sin(turn)
    const y = middle + along * Math.sin(turn) + across * Math.cos(turn)
    return `${x.toFixed(2)} ${y.toFixed(2)}`
  }
  const directions = crossed ? [angle, angle + 90] : [angle]
  const lines: string[] = []
  for (const degrees of directions) {
    const gap = crossed ? spacing * 1.4 : spacing
    for (let across = -Math.floor(reach / gap) * gap; across <= reach; across += gap) {
      lines.push(`M${at(-reach, across, degrees)}L${at(reach, across, degrees)}`)
    }
  }
  return lines.join('')
}

/** Up to two letters: first and last word of the name. */
export function initialsOf(name: string): string {
  const words = name.trim().split(/\s+/u).filter(Boolean)
  const letters = words.length > 1 ? [words[0], words.at(-1)] : [words[0]]
  return letters
    .map((word) => [...(word ?? '')][0] ?? '')
    .join('')
    .toLocaleUpperCase()
}
