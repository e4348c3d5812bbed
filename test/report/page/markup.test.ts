import { describe, expect, it } from 'vitest';
import { attributeNames, element, htmlNames, svgNames, together } from '../../../src/report/page/markup.js';
import { printable } from '../../../src/report/printable.js';
import fc from '../../property.js';

describe('a piece of markup', () => {
  it.each([
    ['<script>alert(1)</script>', '&lt;script&gt;alert(1)&lt;/script&gt;'],
    [`" onload='x`, '&quot; onload=&#39;x'],
    ['a & b', 'a &amp; b'],
    ['\u001b[31m', '\\u001b[31m'],
    ['\u202eevil', '\\u202eevil'],
  ])('shows %j as text, within an element and in an attribute', (hostile, shown) => {
    expect(element('p', { title: hostile }, hostile).toString()).toBe(`<p title="${shown}">${shown}</p>`);
  });

  it('holds no sign that begins or ends anything but its own, whatever the text', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (text) => {
        const [, inAttribute = '', within = ''] =
          /^<p title="([^"<>]*)">([^<>]*)<\/p>$/.exec(element('p', { title: text }, text).toString()) ?? [];
        for (const each of [inAttribute, within])
          expect(each).not.toMatch(/&(?!(?:amp|lt|gt|quot|#39);)|[\p{Cc}\p{Cf}\p{Cs}]/u);
        expect(readBack(inAttribute)).toBe(printable(text));
        expect(readBack(within).replaceAll('\u00a0', ' ')).toBe(printable(text).replaceAll('\u00a0', ' '));
      }),
    );
  });

  it('keeps a number and its unit on one line', () => {
    expect(element('p', {}, 'at 5.1 A, 20 mΩ and 5 % of 3 modules').toString()).toBe(
      '<p>at 5.1\u00a0A, 20\u00a0mΩ and 5\u00a0% of 3 modules</p>',
    );
  });

  it('leaves out what is not there, and rounds the numbers of a drawing', () => {
    const line = element('line', { x1: 1 / 3, x2: -0.01, class: undefined }, undefined, false);
    expect(line.toString()).toBe('<line x1="0.3" x2="0"></line>');
    expect(together('a', [element('br', {}), 0]).toString()).toBe('a<br>0');
  });

  it('can be nothing that runs, and have nothing that fetches', () => {
    const names = [...htmlNames, ...svgNames].map(String);
    for (const name of [
      'script',
      'style',
      'iframe',
      'object',
      'embed',
      'img',
      'link',
      'foreignObject',
      'use',
    ])
      expect(names).not.toContain(name);
    const attributes = attributeNames.map(String);
    expect(attributes.filter((name) => /^on|^style$|^src|action|xlink/.test(name))).toEqual([]);
  });
});

function readBack(text: string): string {
  const signs: Readonly<Record<string, string>> = { amp: '&', lt: '<', gt: '>', quot: '"', '#39': "'" };
  return text.replace(/&(amp|lt|gt|quot|#39);/g, (_, name: string) => signs[name] ?? '');
}
