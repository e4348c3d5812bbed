import type { Clock } from '../clock/clock.js';
import type { ReplayAddress } from '../files/bench.js';
import { type Connect, connectorFor } from '../instrument/connect.js';
import type { Connection } from '../instrument/connection.js';
import type { OpenedSimulation } from '../simulation/open-simulation.js';

/** The ways to connect, each loaded only when it is used. */
export function connectors(clock: Clock, simulation?: OpenedSimulation): Connect {
  let replay: ((address: ReplayAddress) => Promise<Connection>) | undefined;
  return connectorFor({
    tcp: async (address, _driver, _role, within) =>
      (await import('../instrument/tcp-connection.js')).openTcp(
        address,
        within === undefined ? {} : { connecting: within },
      ),
    serial: async (address, driver) =>
      (await import('../instrument/serial-connection.js')).openSerial(address, driver.wire.serial),
    replay: async (address) => {
      const { replays } = await import('../instrument/replay-connection.js');
      replay ??= replays(clock);
      return replay(address);
    },
    ...(simulation === undefined
      ? {}
      : {
          simulated: (address, driver, post) =>
            Promise.resolve(simulation.connect(post, driver, address.dialect)),
        }),
  });
}
