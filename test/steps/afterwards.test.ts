import { describe, expect, it } from 'vitest';
import { afterwards } from '../../src/steps/afterwards.js';

const fails = (text: string) => () => Promise.reject(new Error(text));

describe('putting things back', () => {
  it('comes after the work', async () => {
    const done: string[] = [];
    const doing = (what: string) => () => {
      done.push(what);
      return Promise.resolve();
    };
    await afterwards(doing('work'), doing('back'));
    expect(done).toEqual(['work', 'back']);
  });

  it('is done after an error too, which stays the reason whatever else goes wrong', async () => {
    let back = false;
    const putBack = () => {
      back = true;
      return Promise.reject(new Error('the line is dead'));
    };
    await expect(afterwards(fails('a guard tripped'), putBack)).rejects.toThrow('a guard tripped');
    expect(back).toBe(true);
  });

  it('is an error of its own where the work went well', async () => {
    await expect(afterwards(() => Promise.resolve(), fails('the line is dead'))).rejects.toThrow(
      'the line is dead',
    );
  });
});
