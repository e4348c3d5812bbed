import type { Seconds } from '../quantity/quantity.js';

/** Nothing is read while a module settles under load, so nothing guards it: a minute is the most of that. */
export const longestDwell: Seconds = 60;
