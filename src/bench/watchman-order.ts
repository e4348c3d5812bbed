import type { Bench } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import { Expression } from '../files/expression.js';

/** What the watchman must know to switch a load off with nobody's help. */
export interface Order {
  /** Where what it did is to be written. */
  readonly folder: string;
  /** Its load, its limits, and none of the other instruments: they are left alone. */
  readonly bench: Bench;
  readonly driver: Driver;
}

/** The order as one line. It goes from one process of this program to another, so no schema reads it. */
export function orderText({ folder, bench, driver }: Order): string {
  const { name, instruments, leads, voltageFrom, limits } = bench;
  const alone: Bench = { name, instruments: { load: instruments.load }, leads, voltageFrom, limits };
  return JSON.stringify({ folder, bench: alone, driver } satisfies Order);
}

/** The inverse of {@link orderText}. */
export function readOrder(text: string): Order {
  return JSON.parse(text, (_, value: unknown) =>
    isExpression(value) ? new Expression(value.source) : value,
  ) as Order;
}

/** In JSON an expression is its source and nothing else. */
function isExpression(value: unknown): value is { readonly source: string } {
  if (value === null || typeof value !== 'object') return false;
  const { source, ...others } = value as { readonly source?: unknown };
  return typeof source === 'string' && Object.keys(others).length === 0;
}
