import { expect, it, onTestFinished } from 'vitest';
import { openRunView } from '../../../src/cli/live-view/run-view.js';
import { loadPlan } from '../../../src/cli/load-plan.js';
import { realClock } from '../../../src/clock/real-clock.js';
import { StoppedByOperator } from '../../../src/run/stopped.js';
import type { Streams } from '../../../src/cli/streams.js';
import { follow, send } from '../../view/a-view.js';

it('a page of a run that somebody stopped before its view was open shows that it is being stopped', async () => {
  const loaded = await loadPlan({
    procedure: 'quick-look',
    bench: 'fixtures/benches/nursery.yaml',
    modules: ['fixtures/modules/K1.yaml'],
  });
  let said = '';
  const stderr = { write: (text: string) => (said += text) } as unknown as Streams['stderr'];
  const signal = AbortSignal.abort(new StoppedByOperator('stopped with Ctrl-C'));
  const stop = {
    ...{ signal, hurry: new AbortController().signal },
    ...{ wish: () => undefined, release: () => undefined },
  };
  const view = await openRunView(loaded, realClock, stop, { stderr });
  onTestFinished(() => view.close());
  const [, port = '', path = ''] = /http:\/\/127\.0\.0\.1:(\d+)(\S+)/.exec(said) ?? [];
  const { headers } = await send(Number(port), path);
  const page = await follow(Number(port), headers['set-cookie']?.[0]?.split(';')[0] ?? 'none');
  await page.heard(({ kind }) => kind === 'everything');
  expect(page.state?.stopping).toBe(true);
});
