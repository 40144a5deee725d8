/** Where on the frame a zone lies, in words that follow a comma. */
export const placeWords: Readonly<Record<string, string>> = {
  centre: 'middle',
  partway: 'part way out',
  corners: 'corners',
  C: 'middle',
  N: 'top',
  S: 'bottom',
  W: 'left',
  E: 'right',
  NW: 'upper left',
  NE: 'upper right',
  SW: 'lower left',
  SE: 'lower right',
  'inner-NW': 'inner upper left',
  'inner-NE': 'inner upper right',
  'inner-SW': 'inner lower left',
  'inner-SE': 'inner lower right',
};
