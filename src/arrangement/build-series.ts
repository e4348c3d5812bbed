import { UnfitWishError } from './arrangement-error.js';
import type { ModuleProfile } from './module-profile.js';
import type { SeriesBuild, SeriesWish } from './series-build.js';

export function buildSeries(profiles: readonly ModuleProfile[], wish: SeriesWish): SeriesBuild {
  void wish;
  throw new UnfitWishError(`${profiles.length} modules are no string yet`, 'Wait.');
}
