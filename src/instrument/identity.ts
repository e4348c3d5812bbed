import type { Driver } from '../files/driver.js';

const number = /^[+-]?[\d.]+(?:E[+-]?\d+)?$/i;

/**
 * Whether a reply may be the identity of an instrument that the driver is for: printable, not a bare number
 * (that is an answer to something else), not the question (that is an echo of which the driver does not tell: the
 * next one, of what was told to switch off, would say that it is off), and what the driver asks for where it asks for something.
 */
export function isIdentityFor(driver: Driver): (reply: string) => boolean {
  return (reply) => {
    const text = reply.trim();
    return (
      /^[\x20-\x7e]{1,300}$/.test(text) &&
      !number.test(text) &&
      text !== driver.identify.trim() &&
      (driver.identity === undefined || driver.identity.finds(text))
    );
  };
}
