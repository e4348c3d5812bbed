import { UnfitWishError, type UnfitModule } from './arrangement-error.js';
import type { ModuleProfile } from './module-profile.js';
import type { Selection, SelectionWish } from './selection.js';

export function selectModules(
  found: { readonly profiles: readonly ModuleProfile[]; readonly unfit: readonly UnfitModule[] },
  wish: SelectionWish,
): Selection {
  void wish;
  throw new UnfitWishError(`${found.profiles.length} modules are no selection yet`, 'Wait.');
}
