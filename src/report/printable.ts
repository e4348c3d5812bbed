import { printable } from '../quantity/printable.js';

export { printable };

/** Plain data with every text in it made printable; what is neither list nor plain object stays as it is. */
export function printableData<T>(data: T): T {
  if (typeof data === 'string') return printable(data) as T;
  if (Array.isArray(data)) return data.map(printableData) as T;
  if (data === null || typeof data !== 'object' || Object.getPrototypeOf(data) !== Object.prototype)
    return data;
  return Object.fromEntries(Object.entries(data).map(([key, value]) => [key, printableData(value)])) as T;
}
