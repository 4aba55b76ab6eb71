/** Colour and dash of the nth of several curves: four colours that colour-blind eyes tell apart, then the same dashed. */
export function seriesLook(place: number): { colour: string; dash: string } {
  const colours = ['var(--flux)', 'var(--accent)', 'var(--teal)', 'var(--violet)'];
  const dashes = ['none', '5 2', '2 2'];
  return { colour: colours[place % colours.length], dash: dashes[Math.floor(place / colours.length) % dashes.length] };
}
