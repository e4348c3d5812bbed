/** One thing that may be required of the result. */
export interface CriterionQuestion {
  readonly finding: string;
  readonly form: 'at-least' | 'at-most' | 'is';
  readonly ask: string;
  readonly why: string;
}

/** A question that somebody has of a module, and the shipped procedure that answers it. */
export interface Purpose {
  readonly word: string;
  readonly means: string;
  /** None where it begins empty. */
  readonly from?: string;
  /** How many modules a run of it takes, at least. */
  readonly modules: number;
  readonly criteria: readonly CriterionQuestion[];
}

const current: CriterionQuestion = {
  finding: 'usable-current',
  form: 'at-least',
  ask: 'How much current must it be good for?',
  why: 'What the thing that it is to feed draws at most: 3 A, or a share of its label: 100 % of rated-current.',
};
const droop: CriterionQuestion = {
  finding: 'droop-resistance',
  form: 'at-most',
  ask: 'How much may its voltage droop, at most?',
  why: 'As a resistance: 50 mohm is 50 mV for each ampere.',
};
const recommended: CriterionQuestion = {
  finding: 'recommended-current',
  form: 'at-least',
  ask: 'How much current must it be good for continuously?',
  why: 'Of the recommendation, which is derated: with a margin of 80 %, 3 A take a module that holds 3.75 A.',
};
const limitStyle: CriterionQuestion = {
  finding: 'limit-style',
  form: 'is',
  ask: 'How must it behave at its limit?',
  why: 'constant-current, foldback, constant-power, hiccup or latch-off; a motor, say, is started by constant-current.',
};
const rise: CriterionQuestion = {
  finding: 'temperature-rise',
  form: 'at-most',
  ask: 'How far above the air may it become, at most?',
  why: 'Where the thermometer touches it, as a difference: 40 K.',
};
const recovery: CriterionQuestion = {
  finding: 'recovery-time',
  form: 'at-most',
  ask: 'How soon must it be back after an overload?',
  why: 'From the load going off to the voltage being back: 2 s.',
};
const ofGroup: CriterionQuestion = {
  finding: 'group-current',
  form: 'at-least',
  ask: 'How much current must they hold together?',
  why: 'What they are to feed draws at most: 6 A, or a share of their labels: 80 % of rated-current.',
};
const imbalance: CriterionQuestion = {
  finding: 'imbalance',
  form: 'at-most',
  ask: 'How unequal may their currents be, at most?',
  why: 'The largest less the smallest, over their mean: 10 %.',
};
const idle: CriterionQuestion = {
  finding: 'open-circuit-voltage',
  form: 'at-most',
  ask: 'How high may its voltage be with no load?',
  why: 'What it is to feed must bear it: 16 V, or a share of the label: 105 % of rated-voltage.',
};

/** In the order in which a module is examined. */
export const purposes: readonly Purpose[] = [
  {
    word: 'alive',
    means: 'is it alive, and does it hold its nameplate?',
    from: 'quick-look',
    modules: 1,
    criteria: [current, droop],
  },
  { word: 'earth', means: 'is its output tied to earth?', from: 'isolation', modules: 1, criteria: [] },
  {
    word: 'limit',
    means: 'what is its real limit?',
    from: 'real-limit',
    modules: 1,
    criteria: [current, recommended, droop],
  },
  {
    word: 'how',
    means: 'how does it limit, and what flows into a short?',
    from: 'limit-shape',
    modules: 1,
    criteria: [current, limitStyle],
  },
  {
    word: 'warm',
    means: 'how warm does it get in hours?',
    from: 'thermal-soak',
    modules: 1,
    criteria: [current, rise],
  },
  {
    word: 'share',
    means: 'do several share a load, and what do they hold together?',
    from: 'sharing',
    modules: 2,
    criteria: [ofGroup, imbalance],
  },
  {
    word: 'stack',
    means: 'may they be stacked, and which gives way first?',
    from: 'stacking',
    modules: 2,
    criteria: [ofGroup],
  },
  {
    word: 'same',
    means: 'is it the same as before, after it was opened?',
    from: 'acceptance',
    modules: 1,
    criteria: [current, recovery],
  },
  {
    word: 'other',
    means: 'something else: an empty one, with every kind of step explained',
    modules: 1,
    criteria: [idle],
  },
];
