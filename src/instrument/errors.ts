/** Everything that can go wrong with an instrument, in one place for those who want to tell them apart. */
export * from './connection-errors.js';
export * from './instrument-errors.js';
export * from './replay-errors.js';
export * from './reply-errors.js';
