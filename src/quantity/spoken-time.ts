import type { Seconds } from './quantity.js';

/** A time as one says it: `under 1 s`, `48 s`, `2 min 5 s`, `1 h 3 min`. To the second, above an hour to the minute. */
export function spokenTime(seconds: Seconds): string {
  const whole = Math.round(seconds);
  if (whole < 1) return 'under 1 s';
  if (whole < 60) return `${whole} s`;
  const minutes = whole < 3600 ? Math.floor(whole / 60) : Math.round(whole / 60);
  if (minutes < 60) return joined(minutes, 'min', whole % 60, 's');
  return joined(Math.floor(minutes / 60), 'h', minutes % 60, 'min');
}

function joined(large: number, unit: string, small: number, smaller: string): string {
  return small === 0 ? `${large} ${unit}` : `${large} ${unit} ${small} ${smaller}`;
}

/** The same as a clock that runs shows it: `0:07`, `1:41`, `1:03:20`. */
export function clockTime(seconds: Seconds): string {
  const whole = Math.max(0, Math.round(seconds));
  const two = (value: number): string => String(value).padStart(2, '0');
  const hours = Math.floor(whole / 3600);
  const minutes = Math.floor(whole / 60) % 60;
  return hours === 0 ? `${minutes}:${two(whole % 60)}` : `${hours}:${two(minutes)}:${two(whole % 60)}`;
}
