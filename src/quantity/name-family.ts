/**
 * What is filed under a name, or under the family it belongs to: `share-of-*` stands for every name that
 * begins so and goes on. Undefined where there is neither.
 */
export function ofNameOrFamily<Value>(name: string, all: Readonly<Record<string, Value>>): Value | undefined {
  if (Object.hasOwn(all, name)) return all[name];
  const family = Object.keys(all).find(
    (each) => each.endsWith('*') && name.length >= each.length && name.startsWith(each.slice(0, -1)),
  );
  return family === undefined ? undefined : all[family];
}
