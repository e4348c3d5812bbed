import { dropoutSearch } from './dropout-search.js';
import { loadRamp } from './load-ramp.js';
import { openCircuit } from './open-circuit.js';
import { operatorStep } from './operator-step.js';
import type { StepKind } from './step-kind.js';
import { wait } from './wait.js';

/** Every kind of step there is. A new kind is one file and one line here. */
export const stepKinds: readonly StepKind[] = [openCircuit, loadRamp, dropoutSearch, operatorStep, wait];
