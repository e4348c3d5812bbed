import type { Seconds } from '../quantity/quantity.js';

/** What a supply takes to start. */
export const startUp: Seconds = 2;
