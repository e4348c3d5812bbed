/** A chart of rows read back off its drawing alone: by the numbers at the ticks below, in the unit of the axis. */
export interface RowRead {
  readonly shape: string;
  readonly value: number;
  /** What the bar through the value covers, where there is one. */
  readonly between: readonly [low: number, high: number] | undefined;
  /** Whether an arrow without an end says that the value may lie further on. */
  readonly goesOn: boolean;
}

export interface RowsRead {
  readonly rows: readonly RowRead[];
  /** The shaded stretch. */
  readonly band: { readonly from: number; readonly to: number } | undefined;
}

export function readRows(text: string, id: string): RowsRead {
  const from = text.lastIndexOf('<svg', text.indexOf(`id="${id}-title"`));
  const svg = text.slice(from, text.indexOf('</svg>', from));
  const at = scaleOf(svg);
  const band = /class="between" x="([^"]+)" y="[^"]+" width="([^"]+)"/.exec(svg);
  return {
    rows: svg
      .split('<g class="s')
      .slice(1)
      .filter((row) => row.includes('class="name"'))
      .map((row) => {
        const [, shape = '', x] = /class="shape" data-of="([^"]+)" d="M(\S+) /.exec(row) ?? [];
        const bar = /class="whisker" d="[^"]*M(\S+) \S+H([\d.]+)"/.exec(row);
        return {
          shape,
          value: at(x),
          between: bar === null ? undefined : [at(bar[1]), at(bar[2])],
          goesOn: /class="whisker" d="M\S+ \S+h-?14m/.test(row),
        };
      }),
    band:
      band === null ? undefined : { from: at(band[1]), to: at(String(Number(band[1]) + Number(band[2]))) },
  };
}

function scaleOf(svg: string): (x: string | undefined) => number {
  const ticks = [...svg.matchAll(/class="tick" x="([^"]+)"[^>]*>([^<]+)/g)].map(([, x, value = '']) => ({
    x: Number(x),
    value: Number(value.replace('−', '-')),
  }));
  const [first, last] = [ticks[0], ticks.at(-1)];
  if (first === undefined || last === undefined || first === last) throw new Error('an axis without ticks');
  const slope = (last.value - first.value) / (last.x - first.x);
  return (x) => first.value + slope * (Number(x) - first.x);
}
