import type { AnyBuild } from './any-build.js';
import { combinationAsJson } from './combination-json.js';
import { selectionAsJson } from './selection-json.js';
import { stagedSupplyAsJson } from './staged-supply-json.js';
import type { CombinationJson } from '../schema/combination-schema.js';
import type { SelectionJson } from '../schema/selection-schema.js';
import type { StagedSupplyJson } from '../schema/staged-supply-schema.js';

export type BuildJson = CombinationJson | StagedSupplyJson | SelectionJson;

/** What was worked out, as one JSON object. */
export function buildAsJson(build: AnyBuild): BuildJson {
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
