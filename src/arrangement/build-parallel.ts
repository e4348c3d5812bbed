import type { ModuleProfile } from './module-profile.js';
import type { ParallelBuild, ParallelWish } from './parallel-build.js';

export function buildParallel(profiles: readonly ModuleProfile[], wish: ParallelWish): ParallelBuild {
  void profiles;
  void wish;
  throw new Error('not yet');
}
