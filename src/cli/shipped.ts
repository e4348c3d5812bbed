import { sep } from 'node:path';
import { fileURLToPath } from 'node:url';

const packageFolder = new URL('../../', import.meta.url);

export const shipped = {
  procedures: fileURLToPath(new URL('procedures/', packageFolder)),
  drivers: fileURLToPath(new URL('drivers/', packageFolder)),
  tolerances: fileURLToPath(new URL('procedures/tolerances/', packageFolder)),
};

/** Where a driver that is named on the command line is sought. */
export const shelves = { relativeTo: '.', shipped: shipped.drivers };

/** As a record names a file: those that come with the program by their place in it, wherever that is. */
export function recordedPath(path: string): string {
  const root = fileURLToPath(packageFolder);
  return path.startsWith(root) ? path.slice(root.length).split(sep).join('/') : path;
}
