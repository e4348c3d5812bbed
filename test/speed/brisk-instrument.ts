import { once } from 'node:events';
import { type AddressInfo, createServer } from 'node:net';

/**
 * A load with a brick on it and a meter at the brick, in a process of its own: it answers what the shipped drivers
 * `load-input-scpi` and `meter-read-scpi` ask as fast as can be, so that what is timed is who asks. It writes its port
 * to standard output and ends with its standard input.
 */
const openCircuit = 15.21;
const droop = 0.018;
const leads = 0.035;

const load = { input: '0', amps: 0 };
let answered = 0;

const server = createServer({ noDelay: true }, (socket) => {
  let begun = '';
  socket.setEncoding('latin1').on('data', (text: string) => {
    const messages = (begun + text).split('\n');
    begun = messages.pop() ?? '';
    for (const message of messages) {
      const reply = replyTo(message);
      if (reply !== undefined) socket.write(`${reply}\n`, 'latin1');
    }
  });
  socket.on('error', () => undefined);
});
server.listen(0, '127.0.0.1');
await once(server, 'listening');
process.stdout.write(`${(server.address() as AddressInfo).port}\n`);
process.stdin.resume().once('end', () => process.exit());

function replyTo(message: string): string | undefined {
  answered += 1;
  const flowing = load.input === '1' ? load.amps : 0;
  switch (message) {
    case 'READ?':
      return asNr3(openCircuit - droop * flowing);
    case 'MEAS:VOLT?':
      return asNr3(openCircuit - (droop + leads) * flowing);
    case 'MEAS:CURR?':
      return asNr3(flowing);
    case 'INP?':
      return load.input;
    case 'CONF?':
      return '"VOLT +1.0E+01,+1.0E-05"';
    case 'SYST:ERR?':
      return '0,"No error"';
    case '*IDN?':
      return 'NURSERY,BRISK,K1,1.0';
    default:
      obey(message);
      return undefined;
  }
}

function obey(message: string): void {
  const set = /^CURR (\S+)$/.exec(message);
  if (set !== null) load.amps = Number(set[1]);
  if (message === 'INP ON') load.input = '1';
  if (message === 'INP OFF') load.input = '0';
}

/** With a last digit that moves, as that of any instrument does. */
function asNr3(value: number): string {
  return (value + 1e-5 * (answered % 10)).toExponential(6).toUpperCase();
}
