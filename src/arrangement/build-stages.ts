import type { ModuleProfile } from './module-profile.js';
import type { StagedBuild } from './staged-build.js';
import type { StagesWish } from './stages-wish.js';

export function buildStages(profiles: readonly ModuleProfile[], wish: StagesWish): StagedBuild {
  void profiles;
  void wish;
  throw new Error('not yet');
}
