/** A storage folder and, unless unwanted, a database server of their own; `close` removes both. */
export declare const openTestRoom: (wish?: {
  database?: boolean
  build?: boolean
}) => Promise<{ folder: string; env: Record<string, string>; close: () => Promise<void> }>
