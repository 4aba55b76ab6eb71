import type { Measurement } from './measurement';
import type { Problem } from './problem';

/** What measuring one spectrum gave: its measurement, or why there is none. */
export type MeasureResult = { measurement: Measurement } | { problem: Problem };
