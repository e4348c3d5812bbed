import type { AnyBuild } from './any-build.js';
import { combinationAsJson } from './combination-json.js';
import { selectionAsJson } from './selection-json.js';
import { stagedSupplyAsJson } from './staged-supply-json.js';

/** What was worked out, as one JSON object. */
export function buildAsJson(build: AnyBuild): object {
  switch (build.kind) {
    case 'parallel':
    case 'series':
      return combinationAsJson(build);
    case 'stages':
      return stagedSupplyAsJson(build);
    case 'selection':
      return selectionAsJson(build);
  }
}
