import { describe, expect, it } from 'vitest';
import { css, dark, dashes, light, type Palette } from '../../../src/report/page/look.js';

describe.each([
  ['light', light],
  ['dark', dark],
])('the %s palette', (_, palette) => {
  const texts: readonly (keyof Palette)[] = ['ink', 'soft', 'good', 'bad', 'unsure'];
  const colours = [...texts.map((name) => String(palette[name])), ...palette.lines];

  // WCAG 2.2, 1.4.3: 4.5 to 1 for text. The names of lines are text in their colour.
  it.each(['paper', 'panel'] as const)('lets every text stand out from the %s', (behind) => {
    const low = colours.filter((colour) => contrast(colour, palette[behind]) < 4.5);
    expect(low).toEqual([]);
  });

  // About six levels are asked for, and nine are the most that round numbers make of it.
  it('lets the numbers of a map stand out from its darkest part', () => {
    const laid = Array.from({ length: 9 }).reduce<Rgb>(
      (under) => mixed(rgb(palette.heat), under, 0.13),
      rgb(palette.paper),
    );
    expect(contrastOf(rgb(palette.ink), laid)).toBeGreaterThan(4.5);
  });

  it('has a dash of its own for each line, and no colour twice', () => {
    expect(new Set(palette.lines).size).toBe(palette.lines.length);
    expect(new Set(dashes).size).toBe(palette.lines.length);
  });

  // Machado, Oliveira and Fernandes 2009 (severity 1), in linear RGB; the three kinds of dichromacy.
  it.each(Object.entries(dichromats()))('tells its first three lines apart for %s', (__, matrix) => {
    const seen = palette.lines.slice(0, 3).map((colour) => seenBy(matrix, rgb(colour)));
    for (const [index, one] of seen.entries())
      for (const other of seen.slice(index + 1)) expect(distance(one, other)).toBeGreaterThan(0.06);
  });
});

it('the look loads nothing', () => {
  expect(css).not.toMatch(/url\(|@import|http|<\//);
});

it('paper is white in print, whatever the screen likes', () => {
  expect(css).toMatch(/@media print\{\s*:root\{color-scheme:light;[^}]*--paper:#fff\}/);
});

type Rgb = readonly [number, number, number];

/** Linear, 0 to 1 (IEC 61966-2-1). */
function rgb(colour: string): Rgb {
  const channel = (at: number): number => {
    const value = Number.parseInt(colour.slice(at, at + 2), 16) / 255;
    return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
  };
  return [channel(1), channel(3), channel(5)];
}

/** Relative luminance and contrast ratio by WCAG 2.2. */
function contrast(one: string, other: string): number {
  return contrastOf(rgb(one), rgb(other));
}

function contrastOf(one: Rgb, other: Rgb): number {
  const luminance = ([r, g, b]: Rgb): number => 0.2126 * r + 0.7152 * g + 0.0722 * b;
  const [low = 0, high = 0] = [luminance(one), luminance(other)].sort((a, b) => a - b);
  return (high + 0.05) / (low + 0.05);
}

/** Alpha compositing is done on the encoded values, as browsers do. */
function mixed(over: Rgb, under: Rgb, alpha: number): Rgb {
  const encoded = (value: number): number =>
    value <= 0.0031308 ? value * 12.92 : 1.055 * value ** (1 / 2.4) - 0.055;
  const linear = (value: number): number =>
    value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
  const channel = (index: 0 | 1 | 2): number =>
    linear(alpha * encoded(over[index]) + (1 - alpha) * encoded(under[index]));
  return [channel(0), channel(1), channel(2)];
}

function dichromats(): Readonly<Record<string, readonly Rgb[]>> {
  return {
    protanopes: [
      [0.152286, 1.052583, -0.204868],
      [0.114503, 0.786281, 0.099216],
      [-0.003882, -0.048116, 1.051998],
    ],
    deuteranopes: [
      [0.367322, 0.860646, -0.227968],
      [0.280085, 0.672501, 0.047413],
      [-0.01182, 0.04294, 0.968881],
    ],
    tritanopes: [
      [1.255528, -0.076749, -0.178779],
      [-0.078411, 0.930809, 0.147602],
      [0.004733, 0.691367, 0.3039],
    ],
  };
}

function seenBy(matrix: readonly Rgb[], [r, g, b]: Rgb): Rgb {
  const [x, y, z] = matrix.map(([m0, m1, m2]) => m0 * r + m1 * g + m2 * b);
  return [x ?? 0, y ?? 0, z ?? 0];
}

function distance(one: Rgb, other: Rgb): number {
  return Math.hypot(...one.map((value, index) => value - (other[index] ?? 0)));
}
