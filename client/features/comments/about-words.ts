/** A place after the word "about": `at 1:23.4` is told as `1:23.4`, `from 0:08.0 to 0:10.0` as `0:08.0 to 0:10.0`. */
export const aboutWords = (place: string): string => place.replace(/^(at|from) /, '')
