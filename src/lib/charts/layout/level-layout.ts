import { hydrogenLevelEnergyEv } from '$lib/science/constants/lines';

/** Energy of a hydrogen level above the ground state, eV; Infinity gives the ionisation energy. */
export function energyAboveGroundEv(level: number): number {
  return (Number.isFinite(level) ? hydrogenLevelEnergyEv(level) : 0) - hydrogenLevelEnergyEv(1);
}

/** The energy axis: from below the ground state where a Lyman line is drawn, else from below n = 2; to the limit. */
export function energyAxis(withLyman: boolean): { bottom: number; top: number; ticks: number[]; named: number[] } {
  return withLyman
    ? { bottom: -0.3, top: 13.95, ticks: [0, 5, 10], named: [Infinity, 3, 2, 1] }
    : { bottom: 9.9, top: 13.95, ticks: [10, 11, 12, 13], named: [Infinity, 5, 4, 3, 2] };
}

/** Width of a transition's stroke, CSS pixels: half its signal-to-noise, from 1.2 to 9. */
export function transitionWidth(signalToNoise: number): number {
  return Math.min(9, Math.max(1.2, (signalToNoise || 0) * 0.5));
}
