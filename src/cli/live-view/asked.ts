import { capitalised } from '../../quantity/capitalised.js';
import type { OperatorRequest } from '../../steps/operator.js';
import type { Asked } from '../../view/questions.js';

/** The wiring or a caution, as a page puts it. */
export function acknowledgementAsked(caution: string, text: string): Asked {
  const heading =
    caution === 'wiring'
      ? 'Is it wired so, with nothing switched on yet?'
      : `${capitalised(inWords(caution))}: understood and taken care of?`;
  return { heading, text, answer: 'yes' };
}

/** What a step asks for, by its name for the answer. */
export function requestAsked({ name, text, answer }: OperatorRequest): Asked {
  const what = answer === 'done' ? 'To do' : answer === 'text' ? 'To tell' : 'To read';
  return { heading: `${what}: ${inWords(name)}`, text, answer };
}

function inWords(name: string): string {
  return name.replaceAll('-', ' ');
}
