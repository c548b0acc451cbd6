/** WHO-ITU H.870 (03/2022), adults and children, per week, equal energy. The program cannot know how loud it is at the ear. */
export const hearingNote =
  'Safe listening is up to 40 hours a week at 80 dB(A), for children at 75 dB(A); every 3 dB more halves the time ' +
  '(WHO-ITU H.870). We cannot measure how loud it is at your ear: turn down if you have to raise your voice over it.'
