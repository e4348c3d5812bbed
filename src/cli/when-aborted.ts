/** Does something when a signal is aborted; at once where it is already, which no listener would be told. */
export function whenAborted(signal: AbortSignal, act: () => void): void {
  if (signal.aborted) act();
  else signal.addEventListener('abort', act, { once: true });
}
