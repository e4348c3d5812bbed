import type { ConnectionAddress } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import { formatAddress } from '../files/connection-address.js';
import type { Seconds } from '../quantity/quantity.js';
import { InstrumentUnreachableError } from './connection-errors.js';
import type { Connection } from './connection.js';

/**
 * Opens what a bench file names; the driver and the role are for connections that must know who is meant.
 * `within` is how long the other side may take, where that is not as usual.
 */
export type Connect = (
  address: ConnectionAddress,
  driver: Driver,
  role: string,
  within?: Seconds,
) => Promise<Connection>;

type Kind = ConnectionAddress['kind'];

/** A way to connect for each kind of address that there is one for. */
export type Connectors = {
  readonly [Which in Kind]?: (
    address: Extract<ConnectionAddress, { kind: Which }>,
    driver: Driver,
    role: string,
    within?: Seconds,
  ) => Promise<Connection>;
};

/**
 * One way to connect made of several, by the kind of the address. They are handed in, so that nothing here
 * knows of the simulation.
 * @throws InstrumentUnreachableError when there is no way for a kind
 */
export function connectorFor(connectors: Connectors): Connect {
  return async (address, driver, role, within) => {
    const connect = connectors[address.kind] as Connect | undefined;
    if (connect === undefined) {
      throw new InstrumentUnreachableError({
        address: formatAddress(address),
        reason: `there is no way to connect to a ${address.kind} address here`,
        advice: `Use one of these: ${Object.keys(connectors).join(', ')}.`,
      });
    }
    return connect(address, driver, role, within);
  };
}
