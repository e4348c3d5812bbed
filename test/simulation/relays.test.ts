import { describe, expect, it } from 'vitest';
import { Relays } from '../../src/simulation/relays.js';

const sound = { from: Number.POSITIVE_INFINITY, noticed: true };

describe('the relays of a scanner', () => {
  it('do as they are told', () => {
    const relays = new Relays(sound);
    relays.close([102, 101], 0);
    relays.close([101], 1);
    expect(relays.closed).toEqual([101, 102]);
    relays.open([101], 2);
    expect(relays.said).toEqual([102]);
    relays.open('all', 3);
    expect(relays.closed).toEqual([]);
  });

  it('stay as they were when they stick, and say so', () => {
    const relays = new Relays({ from: 5, noticed: true });
    relays.close([101], 4);
    relays.open('all', 5);
    relays.close([102], 6);
    expect(relays.closed).toEqual([101]);
    expect(relays.said).toEqual([101]);
  });

  it('say what they were told where sticking goes unnoticed', () => {
    const relays = new Relays({ from: 5, noticed: false });
    relays.close([101], 4);
    relays.open('all', 5);
    relays.close([102], 6);
    expect(relays.closed).toEqual([101]);
    expect(relays.said).toEqual([102]);
  });

  it('stick with the next one that is closed, where none was', () => {
    const relays = new Relays({ from: 0, noticed: true });
    relays.open('all', 1);
    expect(relays.closed).toEqual([]);
    relays.close([103], 2);
    relays.open('all', 3);
    expect(relays.closed).toEqual([103]);
  });
});
