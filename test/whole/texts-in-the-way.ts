import type { Page } from 'playwright-core';

interface Box {
  readonly said: string;
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

// What runs in the page is text, as the types of a browser are none of ours.
const boxesOfDrawings = `[...document.querySelectorAll('svg[role=img]')].map((svg) =>
  [svg, ...svg.querySelectorAll('text')].map((each) => {
    const { left, top, right, bottom } = each.getBoundingClientRect();
    return { said: each.textContent, left, top, right, bottom };
  }))`;

/** Pairs of texts of one drawing that overlap, and texts that reach out of it. */
export async function textsInTheWay(page: Page): Promise<readonly string[]> {
  const drawings = await page.evaluate<Box[][]>(boxesOfDrawings);
  return drawings.flatMap(([whole, ...texts]) => [
    ...texts.filter((text) => whole === undefined || !holds(whole, text)).map(({ said }) => `out: ${said}`),
    ...texts.flatMap((one, index) =>
      texts
        .slice(index + 1)
        .filter((other) => overlap(one, other))
        .map((other) => `${one.said} | ${other.said}`),
    ),
  ]);
}

function holds(whole: Box, { left, top, right, bottom }: Box): boolean {
  return left > whole.left - 1 && right < whole.right + 1 && top > whole.top - 1 && bottom < whole.bottom + 1;
}

/** Boxes of text are higher than its letters: lines may touch by a pixel or two. */
function overlap(one: Box, other: Box): boolean {
  return (
    one.left < other.right - 1 &&
    other.left < one.right - 1 &&
    one.top < other.bottom - 3 &&
    other.top < one.bottom - 3
  );
}
