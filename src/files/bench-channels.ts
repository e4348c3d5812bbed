import { type Bench, type InstrumentPlace, placeOf, type Post, postsOf } from './bench.js';
import { lineOf } from './connection-address.js';
import { driverOfChannel } from './driver-channel.js';
import type { Channels, Driver } from './driver.js';
import { BadFileError } from './file-error.js';
import type { FileRead } from './read-text.js';
import { type Complaint, parseYaml } from './yaml-document.js';

/** A driver as it was read, and the post of a bench that it is for. */
interface PostDriver {
  readonly post: Post;
  readonly file: FileRead<Driver>;
}

/**
 * The drivers of a bench, each of the channel that the bench names where its instrument has several.
 * @throws BadFileError that names the line of the bench file, where it names a channel and there is none, or
 * none where there are some, or one that there is not; or where one's choice of a channel would be another's
 */
export function driversOfChannels(
  bench: FileRead<Bench>,
  drivers: readonly PostDriver[],
): readonly PostDriver[] {
  const places = new Map(postsOf(bench.value));
  const complaints = [...channelProblems(places, drivers), ...sharedChoices(places, drivers)];
  if (complaints.length > 0) {
    const document = parseYaml(bench.text, bench.path);
    throw new BadFileError(
      complaints.map((complaint) => document.place(complaint)),
      { advice: '`railproof drivers` and drivers/README.md say which drivers are for several channels' },
    );
  }
  return drivers.map(({ post, file }) => {
    const channel = places.get(post)?.channel;
    return {
      post,
      file: channel === undefined ? file : { ...file, value: driverOfChannel(file.value, channel) },
    };
  });
}

function* channelProblems(
  places: ReadonlyMap<Post, InstrumentPlace>,
  drivers: readonly PostDriver[],
): Generator<Complaint> {
  for (const { post, file } of drivers) {
    const { name, channels } = file.value;
    const channel = places.get(post)?.channel;
    const path = placeOf(post);
    if (channel === undefined) {
      if (channels === undefined) continue;
      yield {
        path,
        message: `the driver ${name} is for instruments with several channels; say which with 'channel', ${fromTo(channels)}`,
      };
    } else if (channels === undefined) {
      yield {
        path: [...path, 'channel'],
        message: `the driver ${name} knows of no channels; leave this out`,
      };
    } else if (channel < channels.first || channel > channels.last) {
      yield {
        path: [...path, 'channel'],
        message: `found ${channel}; the channels of the driver ${name} go ${fromTo(channels)}`,
      };
    }
  }
}

/** Two programs' connections are one instrument's ear: what one chooses in between, the other's messages go to. */
function* sharedChoices(
  places: ReadonlyMap<Post, InstrumentPlace>,
  drivers: readonly PostDriver[],
): Generator<Complaint> {
  const atAddress = new Map<string, PostDriver>();
  for (const one of drivers) {
    const place = places.get(one.post);
    const address = place && lineOf(place.connection);
    if (address === undefined) continue;
    const other = atAddress.get(address);
    atAddress.set(address, one);
    const chooser = [one, other].find((each) => (each?.file.value.channels?.select.length ?? 0) > 0);
    if (other === undefined || chooser === undefined) continue;
    yield {
      path: [...placeOf(one.post), 'connection'],
      message:
        `the ${other.post} is at ${address} too, and the driver ${chooser.file.value.name} chooses its channel by a ` +
        'message of its own: what one is told could go to the channel of the other',
    };
  }
}

function fromTo({ first, last }: Channels): string {
  return `from ${first} to ${last}`;
}
