/** Series colours in order, each with its own marker and dash: never colour alone. */
export const seriesStyles = [
  { color: '#0072B2', dash: '', marker: 'circle' },
  { color: '#D55E00', dash: '6 3', marker: 'square' },
  { color: '#009E73', dash: '2 3', marker: 'triangle' },
  { color: '#CC79A7', dash: '8 3 2 3', marker: 'diamond' },
  { color: '#000000', dash: '1 2', marker: 'cross' },
] as const;

export const ink = { text: '#222222', soft: '#5a5a5a', grid: '#dddddd', data: '#333333' } as const;
export const fontFamily = 'DejaVu Sans, Verdana, sans-serif';
