import { dropoutSearch } from './dropout-search.js';
import { isolationCheck } from './isolation-check.js';
import { loadRamp } from './load-ramp.js';
import { openCircuit } from './open-circuit.js';
import { operatorStep } from './operator-step.js';
import type { StepKind } from './step-kind.js';
import { sharingLog } from './sharing-log.js';
import { stackCheck } from './stack-check.js';
import { limitTrace } from './limit-trace.js';
import { recoveryCheck } from './recovery-check.js';
import { soak } from './soak.js';
import { wait } from './wait.js';

/** Every kind of step there is. A new kind is one file and one line here. */
export const stepKinds: readonly StepKind[] = [
  openCircuit,
  loadRamp,
  dropoutSearch,
  limitTrace,
  recoveryCheck,
  soak,
  isolationCheck,
  operatorStep,
  sharingLog,
  stackCheck,
  wait,
];
