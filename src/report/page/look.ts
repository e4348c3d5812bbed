/**
 * The look of every page, in one place. Calm and printed-looking: one column, warm paper, ink, thin rules; a
 * serif for headings, the system's sans for the rest; no fonts, pictures or scripts from anywhere. Colour never
 * carries meaning alone: lines have dashes and a name at their end, standings a shape and words. Every text
 * stands out from what is behind it by 4.5 to 1 at least, lines by 3 to 1 (WCAG 2.2, 1.4.3 and 1.4.11).
 */
export interface Palette {
  readonly paper: string;
  readonly panel: string;
  readonly ink: string;
  readonly soft: string;
  readonly rule: string;
  readonly good: string;
  readonly bad: string;
  readonly unsure: string;
  /** Of lines, one after the other. Far apart in lightness too, so that those who see fewer colours tell them apart. */
  readonly lines: readonly [string, string, string, string, string, string];
  /** Of a map, behind ink; it is laid on in steps. */
  readonly heat: string;
}

export const light: Palette = {
  paper: '#fdfcf9',
  panel: '#f4f1e9',
  ink: '#1c2226',
  soft: '#515b62',
  rule: '#cfcabd',
  good: '#1d6b45',
  bad: '#a3241c',
  unsure: '#805300',
  lines: ['#1a4f8c', '#b0460a', '#107060', '#7b3f8f', '#6b5d0a', '#3d464c'],
  heat: '#d9772b',
};

export const dark: Palette = {
  paper: '#14181a',
  panel: '#1e2427',
  ink: '#e8e5dc',
  soft: '#aab3b8',
  rule: '#454e53',
  good: '#7fcf9f',
  bad: '#ff9a8c',
  unsure: '#ecc06c',
  lines: ['#8fbdf2', '#f5a06a', '#6fd0bb', '#d3a4e4', '#d4c566', '#c3cbd0'],
  heat: '#c8601f',
};

/** Lines that follow each other differ by their dashes as well; the first is whole. */
export const dashes = ['none', '7 3', '2 3', '10 3 2 3', '5 2 1 2 1 2', '1 2'] as const;

/** The palette as the variables by which styles name its colours. */
export const variables = ({ lines, ...colours }: Palette): string =>
  [
    ...Object.entries(colours).map(([name, colour]) => `--${name}:${colour}`),
    ...lines.map((colour, index) => `--line-${index}:${colour}`),
  ].join(';');

const series = dashes.map(
  (dash, index) => `.s${index}{--c:var(--line-${index})}.s${index} .line{stroke-dasharray:${dash}}`,
);

/**
 * Seen only at an edge beyond which something is hidden: the paper, which moves with what is read, covers a shade that
 * stays where it is.
 */
const shadeWhereMoreIs = [
  'linear-gradient(to right,var(--paper) 1rem,transparent) left/2.2rem 100% no-repeat local',
  'linear-gradient(to left,var(--paper) 1rem,transparent) right/2.2rem 100% no-repeat local',
  'linear-gradient(to right,var(--rule),transparent) left/.9rem 100% no-repeat scroll',
  'linear-gradient(to left,var(--rule),transparent) right/.9rem 100% no-repeat scroll',
].join();

export const css = `
:root{color-scheme:light dark;${variables(light)}}
@media (prefers-color-scheme:dark){:root{${variables(dark)}}}
*{box-sizing:border-box}
html{-webkit-text-size-adjust:100%;text-size-adjust:100%}
body{margin:0;background:var(--paper);color:var(--ink);font:1rem/1.55 system-ui,"Noto Sans","Liberation Sans",sans-serif;
 overflow-wrap:anywhere}
header,main,footer{max-width:46rem;margin-inline:auto;padding-inline:1.15rem}
header{padding-top:2.2rem}
footer{margin-top:3.5rem;padding-block:1rem 2.5rem;color:var(--soft);font-size:.875rem;border-top:1px solid var(--rule)}
h1,h2,h3{font-family:Charter,"Bitstream Charter","Sitka Text",Cambria,"Noto Serif","Liberation Serif",serif;font-weight:600;
 line-height:1.2;text-wrap:balance;break-after:avoid}
h1{font-size:2rem;margin:.2rem 0 .4rem}
h2{font-size:1.35rem;margin:0 0 .7rem}
h3{font-size:1.05rem;margin:1.5rem 0 .4rem}
p{margin:.5rem 0;max-width:40rem}
ul,ol{margin:.5rem 0;padding-left:1.25rem;max-width:40rem}
li{margin:.3rem 0}
li::marker{color:var(--soft)}
a{color:inherit;text-underline-offset:.15em}
a:focus-visible,.wide:focus-visible{outline:2px solid var(--line-0);outline-offset:2px}
section{margin-top:2.6rem}
.kind{margin:0;color:var(--soft);font-size:.9rem}
.lead{font-size:1.15rem;line-height:1.45}
.soft,figcaption,caption{color:var(--soft)}
.skip{position:absolute;left:-99rem}
.skip:focus{left:1rem;top:1rem}
.standing{display:grid;grid-template-columns:3.6rem 1fr;gap:0 1.1rem;margin-top:1.4rem;padding:1.1rem 1.2rem;
 border:1px solid var(--c);border-left-width:.5rem;background:var(--panel);break-inside:avoid}
.standing svg{width:3.6rem;height:3.6rem;color:var(--c)}
.standing .outline{fill:none;stroke:currentColor;stroke-width:4;stroke-linejoin:round}
.standing .sign{fill:none;stroke:currentColor;stroke-width:5;stroke-linecap:round;stroke-linejoin:round}
.standing p{margin:.3rem 0}
.standing .word{margin:0;font-size:1.35rem;font-weight:700;line-height:1.25;color:var(--c)}
.good{--c:var(--good)}.bad{--c:var(--bad)}.unsure{--c:var(--unsure)}
.bad.standing{border-width:3px;border-left-width:.5rem}
.unsure.standing{border-style:dashed;border-left-style:solid}
.plain{--c:var(--ink)}
.facts{display:grid;grid-template-columns:max-content 1fr;gap:.3rem 1.2rem;margin:1.1rem 0 0}
.facts dt{color:var(--soft);font-size:.9rem;line-height:1.7}
.facts dd{margin:0;min-width:0}
.figures{display:grid;grid-template-columns:repeat(auto-fit,minmax(9.5rem,1fr));gap:.9rem 1.4rem;margin:1.1rem 0 .3rem}
.figures div{border-top:1.5px solid var(--ink);padding-top:.35rem}
.figures dt{color:var(--soft);font-size:.88rem;line-height:1.35}
.figures dd{margin:0;font-size:.88rem;line-height:1.35}
.figures .big{font:600 1.25rem/1.3 Charter,"Bitstream Charter","Sitka Text",Cambria,"Noto Serif","Liberation Serif",serif;
 font-variant-numeric:tabular-nums}
.code{font:.86em/1.5 ui-monospace,"Noto Sans Mono","Liberation Mono",monospace;overflow-wrap:anywhere}
.hash{display:inline-block;max-width:64ch;word-break:break-all}
.why{display:block}
.one{break-inside:avoid;margin-top:1.7rem}
.one h3{display:flex;flex-wrap:wrap;gap:.1rem 1rem;justify-content:space-between;margin:0;padding-bottom:.25rem;
 border-bottom:1px solid var(--rule)}
.one caption{position:absolute;width:1px;height:1px;overflow:hidden;clip-path:inset(50%)}
.sign{display:grid;grid-template-columns:5fr 5fr 3fr;gap:.7rem 1.4rem;margin:.8rem 0 0;break-inside:avoid}
.sign dt{color:var(--soft);font-size:.85rem}
.sign dd{margin:0;height:2rem;border-bottom:1px solid var(--ink)}
.wide{overflow-x:auto;margin:.9rem 0;overflow-wrap:normal;background:${shadeWhereMoreIs}}
table{border-collapse:collapse;width:100%;font-size:.94rem;line-height:1.4;font-variant-numeric:tabular-nums}
caption{text-align:left;padding-bottom:.35rem;font-size:.9rem}
th,td{padding:.38rem .9rem .38rem 0;text-align:left;vertical-align:top;border-bottom:1px solid var(--rule)}
th:last-child,td:last-child{padding-right:0}
thead th{font-weight:600;color:var(--soft);font-size:.85rem;border-bottom:1.5px solid var(--ink);vertical-align:bottom}
tbody th{font-weight:600;min-width:5.5rem}
.number{text-align:right}
td.number,td.fixed{white-space:nowrap}
td.text{min-width:9.5rem}
td.long{min-width:13rem}
.state{font-weight:600;white-space:nowrap;color:var(--c,inherit)}
td.long .state{white-space:normal}
figure{margin:1.4rem 0;break-inside:avoid}
figcaption{font-size:.9rem;max-width:40rem}
svg{display:block;max-width:100%;height:auto}
svg text{font:13px system-ui,"Noto Sans","Liberation Sans",sans-serif;fill:var(--ink);font-variant-numeric:tabular-nums}
svg .strong{font-weight:600}
.chart{width:40rem;min-width:30rem}
.chart .tick,.chart .unit{fill:var(--soft)}
.chart .grid{stroke:var(--rule);stroke-width:.6}
.chart .axis{stroke:var(--ink);stroke-width:1.2}
.chart .line{fill:none;stroke:var(--c);stroke-width:2;stroke-linejoin:round}
.chart .bar{fill:var(--c);fill-opacity:.75;stroke:var(--c)}
.chart .band{fill:var(--c);fill-opacity:.18;stroke:none}
.chart .spot{fill:var(--paper);stroke:var(--c);stroke-width:1.6}
.chart .name{fill:var(--c);font-weight:600}
.chart .lead-line{fill:none;stroke:var(--c);stroke-width:.8}
.chart .mark{stroke:var(--ink);stroke-width:1;stroke-dasharray:3 3}
.chart+.chart{margin-top:.9rem}
.chart .between{fill:var(--ink);fill-opacity:.14}
.chart .level{--c:var(--ink)}
.chart .shape{fill:var(--paper);fill-opacity:.7;stroke:var(--c);stroke-width:1.5}
.chart .whisker{fill:none;stroke:var(--c);stroke-width:2}
.chart .reach{fill:none;stroke:var(--c);stroke-width:1}
.chart .joining{fill:none;stroke:var(--c);stroke-width:.8}
.chart .turn{stroke:var(--c);stroke-width:1;stroke-dasharray:2 3}
.chart .shift .shaft{fill:none;stroke:var(--ink);stroke-width:2.2}
.chart .shift .head{fill:var(--ink)}
.chart .heat{fill:var(--heat);fill-opacity:.13}
.chart .rim{fill:none;stroke:var(--ink);stroke-width:2.4}
.chart .contour{fill:none;stroke:var(--ink);stroke-width:1}
.chart .halo{paint-order:stroke;stroke:var(--paper);stroke-width:4;stroke-linejoin:round}
.chart .ribbon{fill:var(--panel);stroke:var(--soft);stroke-width:.8}
${series.join('\n')}
.diagram .wire,.diagram .symbol{fill:none;stroke:var(--ink);stroke-width:1.6;stroke-linecap:square;stroke-linejoin:miter}
.diagram .box,.diagram .resistor{fill:var(--panel);stroke:var(--ink);stroke-width:1.6}
.diagram .solid{fill:var(--ink)}
.diagram .terminal{fill:var(--paper);stroke:var(--ink);stroke-width:1.6}
.diagram .value{fill:var(--soft)}
@media (min-width:30.01rem){
.one table{table-layout:fixed}
.one th{width:17%}
.one thead th:first-child{width:43%}
.one thead th:nth-child(2){width:8%}
.one thead th:nth-child(4){width:12%}
}
@media (max-width:32rem){
.wide:has(>.chart)::before{content:"Wider than this screen: it scrolls sideways.";display:block;position:sticky;left:0;
 width:max-content;max-width:100%;margin-bottom:.3rem;color:var(--soft);font-size:.85rem}
}
@media (max-width:30rem){
h1{font-size:1.6rem}
.facts{grid-template-columns:1fr;gap:0}
.one table,.one thead,.one tbody{display:block;font-size:.88rem}
.one tr{display:grid;grid-template-columns:2.4rem repeat(3,1fr);gap:.1rem .5rem;padding-block:.35rem;
 border-bottom:1px solid var(--rule)}
.one thead tr{border-bottom:1.5px solid var(--ink)}
.one th,.one td{padding:0;border:0}
.one tr>:first-child{grid-column:1/-1}
.hash{max-width:32ch}
.sign{grid-template-columns:1fr}
.facts dd{margin-bottom:.45rem}
.standing{grid-template-columns:2.2rem 1fr;gap:0 .8rem;padding:1rem}
.standing svg{width:2.2rem;height:2.2rem}
.notes thead{position:absolute;left:-99rem}
.notes tbody,.notes tr,.notes th,.notes caption{display:block}
.notes tr{padding-block:.5rem;border-bottom:1px solid var(--rule)}
.notes th,.notes td{padding:.1rem 0;border:0}
.notes td{display:grid;grid-template-columns:7rem 1fr;gap:.6rem;text-align:left;white-space:normal}
.notes td::before{content:attr(data-head);color:var(--soft)}
.notes td>*{grid-column:2}
.notes td:empty{display:none}
.notes td:has(>.hash){grid-template-columns:1fr;gap:0}
.notes td>.hash{grid-column:1}
}
@page{size:A4;margin:15mm 15mm 16mm}
@media print{
:root{color-scheme:light;${variables(light)};--paper:#fff}
html{font-size:9.5pt}
.sign{gap:.35rem 1.4rem;margin-top:.4rem}
.sign dd{height:.75cm}
td .code{font-size:.74em}
section:has(.sign){break-inside:avoid}
body{line-height:1.35}
p,ul,ol,figcaption{max-width:none}
header,main,footer{max-width:none;padding-inline:0}
header{padding-top:0}
.facts{gap:.1rem 1.2rem;margin-top:.5rem}
.facts dt,.facts dd{line-height:1.35}
.standing{grid-template-columns:2.4rem 1fr;margin-top:.7rem;padding:.5rem .8rem}
.standing svg{width:2.4rem;height:2.4rem}
.standing p,.standing ul,.standing li{margin-block:.12rem}
.standing .word{font-size:1.2rem}
.lead{font-size:1.1rem}
.figures{display:flex;flex-wrap:wrap;gap:.6rem 1.2rem;margin-block:.7rem 0}
.figures div{flex:1 1 8.5rem;min-width:min-content}
.figures .big{font-size:1.1rem;white-space:nowrap}
.why{display:inline}
.why::before{content:" · "}
section{margin-top:.9rem}
h2{margin-bottom:.35rem}
section>p:not(:last-child){break-inside:avoid;break-after:avoid}
figure,.wide{margin-block:.5rem}
th,td{padding-block:.2rem}
footer{margin-top:.6rem;padding-block:.3rem 0;break-before:avoid}
tr,li,figure,.standing,.facts{break-inside:avoid}
tbody tr:first-child:not(:last-child){break-after:avoid}
tbody tr:last-child:not(:first-child){break-before:avoid}
thead{display:table-header-group;break-after:avoid}
caption{break-after:avoid}
h1{font-size:16pt;margin-block:.1rem .2rem}h2{font-size:13pt}h3{font-size:11pt}
.wide{overflow:visible;background:none}
.chart{width:100%;max-width:13.5cm;min-width:0}
.diagram{max-height:10.5cm;width:auto}
.skip{display:none}
p,li{orphans:3;widows:3}
}
`;
