import { describe, expect, it } from 'vitest';
import { railVoltages } from '../../src/circuit/rail-voltages.js';

describe('the 0 V rails of a stack', () => {
  it('float at the sum of what lies below', () => {
    expect(railVoltages([12, 13, 14])).toEqual([0, 12, 25]);
  });

  it('sink below the 0 V of the whole above a module that is driven backwards', () => {
    expect(railVoltages([-0.8, 12, 12])).toEqual([0, -0.8, 11.2]);
  });

  it('are none where there is no module', () => {
    expect(railVoltages([])).toEqual([]);
  });
});
