import type { WatchmanReport } from '../record/watchman-report.js';

const causes: Readonly<Record<WatchmanReport['why'], string>> = {
  'runner-vanished': 'the program vanished',
  'runner-stopped-beating': 'the program hung with the load on and was ended',
};

/** What became of the program and what the watchman did, as one sentence without its end. */
export function watchmanText({ why, outcome, reason, took }: WatchmanReport): string {
  return outcome === 'off'
    ? `${causes[why]}; the watchman switched the load off ${seconds(took)} later and read it back`
    : `${causes[why]}; the watchman could not confirm that the load is off: ${reason ?? 'no reason is given'}`;
}

function seconds(took: number): string {
  return `${took < 0.05 ? 'less than 0.1' : took.toFixed(1)} s`;
}
