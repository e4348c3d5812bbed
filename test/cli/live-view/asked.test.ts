import { describe, expect, it } from 'vitest';
import { acknowledgementAsked, requestAsked } from '../../../src/cli/live-view/asked.js';

describe('what a page is asked', () => {
  it('about the wiring is whether it is so', () => {
    expect(acknowledgementAsked('wiring', 'Load to K1.\nNothing else.')).toEqual({
      heading: 'Is it wired so, with nothing switched on yet?',
      text: 'Load to K1.\nNothing else.',
      answer: 'yes',
    });
  });

  it('about a caution names it', () => {
    expect(acknowledgementAsked('hot-surfaces', 'It gets hot.')).toEqual({
      heading: 'Hot surfaces: understood and taken care of?',
      text: 'It gets hot.',
      answer: 'yes',
    });
  });

  it.each([
    ['done', 'To do: unplug module'],
    ['text', 'To tell: unplug module'],
    ['temperature', 'To read: unplug module'],
  ] as const)('by a step, %s, says what it is for', (answer, heading) => {
    const request = { name: 'unplug-module', text: 'Now.', answer };
    expect(requestAsked(request)).toEqual({ heading, text: 'Now.', answer });
  });
});
