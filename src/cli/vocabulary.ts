import { findingNames, findingWords } from '../analysis/finding-names.js';
import { stepKinds } from '../steps/index.js';

/** All that a procedure may speak of; the one place that knows both the steps and the findings. */
export const vocabulary = { stepKinds, findings: findingNames, words: findingWords };
