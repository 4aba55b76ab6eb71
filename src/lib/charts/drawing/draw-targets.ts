import type { Confidence } from '$lib/domain/confidence';
import type { SkyProjection } from '../layout/sky-projection';

interface Target {
  raDegrees: number;
  decDegrees: number;
  confidence: Confidence | null;
}

/** Targets on the sky, doubtful ones first so that secure ones lie on top: dot, thick ring, thin ring, cross. */
export function drawTargets(
  context: CanvasRenderingContext2D,
  element: Element,
  frame: { left: number; top: number; width: number; height: number },
  targets: readonly Target[],
  projection: SkyProjection | null,
  scale: number,
): void {
  const computed = getComputedStyle(element);
  const token = (name: string) => computed.getPropertyValue(`--${name}`).trim();
  context.fillStyle = token('well');
  context.fillRect(frame.left, frame.top, frame.width, frame.height);
  if (!projection) return;
  const middle = { x: frame.left + frame.width / 2, y: frame.top + frame.height / 2 };
  for (const word of [null, 'none', 'ambiguous', 'probable', 'secure'] as const) {
    const colour = token(word ?? 'rule-strong');
    [context.fillStyle, context.strokeStyle, context.lineWidth] = [colour, colour, word === 'probable' ? 2 : 1];
    for (const target of targets) {
      if (target.confidence !== word) continue;
      const { west, north } = projection.place(target);
      const [x, y] = [middle.x + west * scale, middle.y - north * scale];
      context.beginPath();
      if (word === 'none' || word === null) {
        const arm = word === null ? 1 : 2.5;
        context.moveTo(x - arm, y - arm);
        context.lineTo(x + arm, y + arm);
        context.moveTo(x - arm, y + arm);
        context.lineTo(x + arm, y - arm);
        context.stroke();
      } else {
        context.arc(x, y, word === 'probable' ? 2.6 : 3, 0, 2 * Math.PI);
        if (word === 'secure') context.fill();
        else context.stroke();
      }
    }
  }
}
