import type { Style } from '../style.js';
import type { AnyBuild } from './any-build.js';
import { parallelAsText } from './parallel-text.js';
import { selectionAsText } from './selection-text.js';
import { seriesAsText } from './series-text.js';
import { stagesAsText } from './stages-text.js';

/** What was worked out, for a terminal or a text file. */
export function buildAsText(build: AnyBuild, style: Style): string {
  switch (build.kind) {
    case 'parallel':
      return parallelAsText(build, style);
    case 'series':
      return seriesAsText(build, style);
    case 'stages':
      return stagesAsText(build, style);
    case 'selection':
      return selectionAsText(build, style);
  }
}
