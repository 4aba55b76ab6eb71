/** Sizes a canvas for its place on the page at the screen's own resolution, clears it, and speaks CSS pixels from there. */
export function prepareCanvas(
  canvas: HTMLCanvasElement,
  width: number,
  height: number,
): CanvasRenderingContext2D | null {
  const density = window.devicePixelRatio || 1;
  const [wide, high] = [Math.round(width * density), Math.round(height * density)];
  // Setting a canvas's size, even to what it is, throws its buffer away: too dear for every frame of a drag.
  if (canvas.width !== wide) canvas.width = wide;
  if (canvas.height !== high) canvas.height = high;
  const context = canvas.getContext('2d');
  context?.setTransform(density, 0, 0, density, 0, 0);
  context?.clearRect(0, 0, width, height);
  return context;
}
