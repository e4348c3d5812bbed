import type { AnyBuild } from '../build/any-build.js';
import { parallelSheet } from '../sheet/parallel-sheet.js';
import { selectionSheet } from '../sheet/selection-sheet.js';
import { seriesSheet } from '../sheet/series-sheet.js';
import { stagesSheet } from '../sheet/stages-sheet.js';
import { type Made, pageText, type Sheet } from './page.js';

/** The build sheet: whatever was worked out of records, as one HTML file that needs no other. */
export function buildPage(build: AnyBuild, made: Made): string {
  return pageText({ ...sheetOf(build), made, pageKind: 'build sheet' });
}

function sheetOf(build: AnyBuild): Sheet {
  switch (build.kind) {
    case 'parallel':
      return parallelSheet(build);
    case 'series':
      return seriesSheet(build);
    case 'stages':
      return stagesSheet(build);
    case 'selection':
      return selectionSheet(build);
  }
}
