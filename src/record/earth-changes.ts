/** Whether something was done to a module's earth, by what its file says of its changes. */
export function earthWasWorkedOn({
  changes,
}: {
  readonly changes: readonly { readonly what: string }[];
}): boolean {
  return changes.some(({ what }) => /\bearth/i.test(what));
}
