import { describe, expect, it } from 'vitest';
import type { Met } from '../../src/cli/meet-instrument.js';
import { remarkOn, sayLacking, sayMet, wireLacking } from '../../src/cli/new-bench-met.js';
import type { Questions } from '../../src/cli/questions.js';
import { shelves } from '../../src/cli/shipped.js';
import { parseAddress } from '../../src/files/connection-address.js';
import { readDriver } from '../../src/files/read-driver.js';
import { firstWords } from '../../src/instrument/first-words.js';
import type { FamilyMatch } from '../../src/instrument/match.js';

type Answered = Extract<Met, { readonly kind: 'answered' }>;

/** Somebody whose one answer to the question who it is was these bytes. */
function answered(bytes: string, families: readonly FamilyMatch[] = [], sendEnd = '\n'): Answered {
  const words = firstWords(bytes, '*IDN?');
  return { kind: 'answered', identity: words.reply?.trim() ?? '', words, sendEnd, families, left: [] };
}

function family(driver: string, asked: number, understood = asked): FamilyMatch {
  const questions = Array.from({ length: asked }, (_, index) => `Q${index}?`);
  return {
    ...{ driver, role: 'load', asked: questions, understood: questions.slice(0, understood) },
    ...{ otherwise: [], isAnother: false, score: understood / (asked + 1) },
  };
}

function said(tell: (questions: Questions) => void): string {
  const lines: string[] = [];
  const recorder: Pick<Questions, 'say'> = { say: (text) => void lines.push(text) };
  tell(recorder as Questions);
  return lines.join('\n');
}

describe('of whoever was met at an address, railproof new bench says', () => {
  it('of rubbish bytes that the baud rate is wrong, and does not take them for a name', () => {
    const rubbish = answered('\xff\x1b\x80\x07[2J\xfe\n');
    const text = said((questions) => {
      sayMet(questions, rubbish);
    });
    expect(text).toContain('What comes back makes no sense: \\xff\\x1b\\x80\\x07[2J\\xfe.');
    expect(text).toContain('baud rate');
    expect(text).not.toContain('It says that it is');
    expect(remarkOn(rubbish)).not.toContain('It said that it is');
  });

  it('of another device who it says it is, and that no driver reads it', () => {
    const text = said((questions) => {
      sayMet(questions, answered('nursery workshop,label scale,7,1.0\n'));
    });
    expect(text).toContain('It says that it is nursery workshop,label scale,7,1.0.');
    expect(text).toContain(
      'No shipped driver fits: of what they ask nothing was answered as one of them reads it.',
    );
  });

  it('of two drivers that were understood whole which is proposed and why', () => {
    const text = said((questions) => {
      sayMet(questions, answered('N\n', [family('load-source-scpi', 11), family('load-input-scpi', 9)]));
    });
    expect(text).toContain('load-source-scpi fits best: 11 of 11');
    expect(text).toContain('load-input-scpi would do as well: all 9 of its questions were understood too.');
  });

  it('nothing of a second driver that was not understood whole', () => {
    const text = said((questions) => {
      sayMet(questions, answered('N\n', [family('load-source-scpi', 11), family('load-input-scpi', 9, 8)]));
    });
    expect(text).not.toContain('would do as well');
  });

  it.each([
    [true, 'what is sent comes back, and no more'],
    [false, 'Is it switched on'],
  ])('of one that does not answer, where it repeats (%s), what to look at', (repeats, words) => {
    expect(
      said((questions) => {
        sayMet(questions, { kind: 'silent', repeats });
      }),
    ).toContain(words);
  });
});

describe('where an instrument speaks otherwise than the driver has it, railproof new bench', () => {
  it.each([
    ['N\n', '\n', undefined],
    ['N\r\n', '\n', undefined],
    ['*IDN?\nN\n', '\n', 'wire: { echo: true }'],
    ['N\r', '\n', 'wire: { reply-end: "\\r" }'],
    ['N\n', '\r\n', 'wire: { send-end: "\\r\\n" }'],
    ['*IDN?\r\nN\r\nLD> ', '\n', 'wire: { echo: true, prompt: "LD> " }'],
  ])('finds in %j, asked with %j, that it lacks %s', async (bytes, sendEnd, lacking) => {
    const { value: driver } = await readDriver('load-input-scpi', shelves);
    expect(wireLacking(answered(bytes, [family('load-input-scpi', 9)], sendEnd), driver)).toBe(lacking);
  });

  it('says what is lacking, and the command that has a driver fitted', () => {
    const connection = parseAddress('serial:/dev/ttyUSB0?baud=9600');
    if (connection.kind !== 'serial') throw new Error('it is a serial address');
    const text = said((questions) => {
      sayLacking(questions, 'wire: { echo: true }', { name: 'load-input-scpi', role: 'load', connection });
    });
    expect(text).toContain('wire: { echo: true }');
    expect(text).toContain(
      "railproof drivers --try load-input-scpi --connection 'serial:/dev/ttyUSB0?baud=9600' --write my-load",
    );
  });
});
