// Signs drawn for this product: 20 by 20, strokes of 1.5, in the colour of the words beside them.

const strokes = {
  play: 'M6 4.2v11.6L15.5 10z',
  pause: 'M6.75 4v12M13.25 4v12',
  loop: 'M4 8.5V7.25A1.75 1.75 0 0 1 5.75 5.5H15M12.5 3 15 5.5 12.5 8M16 11.5v1.25a1.75 1.75 0 0 1-1.75 1.75H5M7.5 17 5 14.5 7.5 12',
  stepBack: 'M5 4v12M15.5 5v10L8.5 10z',
  stepForward: 'M15 4v12M4.5 5v10l7-5z',
  close: 'm5 5 10 10M15 5 5 15',
  menu: 'M3.5 6h13M3.5 10h13M3.5 14h9',
  more: 'M4.5 9.5v1M10 9.5v1M15.5 9.5v1',
  undo: 'M7 4 3.5 7.5 7 11M4 7.5h7.25a4.25 4.25 0 0 1 0 8.5H7',
  redo: 'M13 4l3.5 3.5L13 11M16 7.5H8.75a4.25 4.25 0 0 0 0 8.5H13',
  plus: 'M10 4v12M4 10h12',
  minus: 'M4 10h12',
  bin: 'M3.5 5.75h13M8 5.5V3.25h4V5.5M5.25 6l.75 10.75h8L14.75 6M8.5 9v4.75M11.5 9v4.75',
  pencil: 'M3.5 16.5l.9-3.9L13.5 3.5l3 3-9.1 9.1zM11.5 5.5l3 3',
  arrowLeft: 'M16.5 10h-13M8 5.5 3.5 10 8 14.5',
  arrowRight: 'M3.5 10h13M12 5.5l4.5 4.5-4.5 4.5',
  arrowUp: 'M10 16.5v-13M5.5 8 10 3.5 14.5 8',
  arrowDown: 'M10 3.5v13M5.5 12l4.5 4.5 4.5-4.5',
  chevronDown: 'm5 7.5 5 5 5-5',
  chevronRight: 'm7.5 5 5 5-5 5',
  tick: 'm4 10.5 4 4 8-9',
  handOver: 'M3.5 3v14M6.5 6.5h6M10 4l2.5 2.5L10 9M16 2.5v9.75M14 12.25h4L16 17z',
  stepAway: 'M7 3v14M10.5 10h6.5M14 7l3 3-3 3M3.5 3v14',
  comment: 'M3.5 4.5h13M3.5 8.5h8.5M3.5 12.5V16h13',
  question: 'M6.5 7a3.5 3.5 0 1 1 5.4 2.95c-1.2.8-1.9 1.35-1.9 2.8M10 15.75v.75',
  microphone: 'M7.25 5.5a2.75 2.75 0 0 1 5.5 0v4a2.75 2.75 0 0 1-5.5 0zM4.5 9.5a5.5 5.5 0 0 0 11 0M10 15v2.5',
  volume: 'M3.5 8v4h2.75L10.5 15.5v-11L6.25 8zM13.25 7.5c1.2 1.4 1.2 3.6 0 5',
  download: 'M10 3v9.5M5.75 8.5 10 12.75l4.25-4.25M4 16.5h12',
  upload: 'M10 13V3.5M5.75 7.75 10 3.5l4.25 4.25M4 16.5h12',
  people:
    'M5 7.5a2.25 2.25 0 1 0 4.5 0 2.25 2.25 0 1 0-4.5 0M2.5 16c.3-3 2.1-4.25 4.75-4.25S11.7 13 12 16M12 5.4a2.25 2.25 0 1 1 .6 4.3M13.5 12c2.4 0 3.8 1.4 4 4',
  link: 'M8.5 11.5a3 3 0 0 0 4.25 0l3-3A3 3 0 0 0 11.5 4.25L10.25 5.5M11.5 8.5a3 3 0 0 0-4.25 0l-3 3A3 3 0 0 0 8.5 15.75l1.25-1.25',
  search: 'M3.5 8.75a5.25 5.25 0 1 0 10.5 0 5.25 5.25 0 1 0-10.5 0M12.75 12.75l3.75 3.75',
  zoomIn: 'M3.5 8.75a5.25 5.25 0 1 0 10.5 0 5.25 5.25 0 1 0-10.5 0M12.75 12.75l3.75 3.75M8.75 6.5V11M6.5 8.75H11',
  zoomOut: 'M3.5 8.75a5.25 5.25 0 1 0 10.5 0 5.25 5.25 0 1 0-10.5 0M12.75 12.75l3.75 3.75M6.5 8.75H11',
  tap: 'M3.5 3v14M16.5 3v14M10 3.5v9M7 9.5l3 3 3-3',
  warning: 'M10 3.5 17 16H3zM10 8.25v3.5M10 13.5v.75'
} as const

// Signs that read as a mass are filled as well as stroked.
const filled: ReadonlySet<IconName> = new Set(['play', 'stepBack', 'stepForward'])
const heavy: ReadonlySet<IconName> = new Set(['pause', 'more'])

export type IconName = keyof typeof strokes

export const iconNames = Object.keys(strokes) as IconName[]

export interface IconProps {
  name: IconName
  /** Pixels. */
  size?: number
}

/** Always beside words or inside a labelled control, so hidden from the accessibility tree. */
export function Icon({ name, size = 20 }: IconProps) {
  return (
    <svg
      width={size}
      height={size}
      viewBox="0 0 20 20"
      fill={filled.has(name) ? 'currentColor' : 'none'}
      stroke="currentColor"
      strokeWidth={heavy.has(name) ? 2.5 : 1.5}
      strokeLinecap="square"
      strokeLinejoin="miter"
      aria-hidden="true"
      focusable="false"
      className="flex-none"
    >
      <path d={strokes[name]} />
    </svg>
  )
}
