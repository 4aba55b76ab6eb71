const COLOURS = [
  'well',
  'paper',
  'grid',
  'ink',
  'ink-quiet',
  'rule-strong',
  'flux',
  'envelope',
  'error-line',
  'sky',
  'model',
  'continuum',
  'telluric',
  'skyline',
  'teal',
  'violet',
  'ochre',
] as const;
const STROKES = ['flux', 'error', 'model', 'continuum'] as const;

/** The theme's colours, widths and dashes as a canvas wants them. */
export interface PlotStyle {
  colour: Record<(typeof COLOURS)[number], string>;
  width: Record<(typeof STROKES)[number], number>;
  dash: Record<(typeof STROKES)[number], number[]>;
}

/** Reads the tokens from the computed style of an element: once a theme, not once a frame. */
export function readPlotStyle(element: Element): PlotStyle {
  const computed = getComputedStyle(element);
  const token = (name: string) => computed.getPropertyValue(`--${name}`).trim();
  return {
    colour: byName(COLOURS, token),
    width: byName(STROKES, (name) => Number(token(`width-${name}`)) || 1),
    dash: byName(STROKES, (name) => token(`dash-${name}`).split(/\s+/).map(Number).filter(Number.isFinite)),
  };
}

function byName<Name extends string, T>(names: readonly Name[], value: (name: Name) => T): Record<Name, T> {
  return Object.fromEntries(names.map((name) => [name, value(name)])) as Record<Name, T>;
}
