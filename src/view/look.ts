import { dark, light, variables } from '../report/page/look.js';

/**
 * The look of the live view: the report's paper, while it is being written. Figures are set like the entries of a
 * printed record, large enough to be read across a bench, right-aligned in their own width so that nothing moves
 * when a digit does. Whatever a colour says, a word and a shape say too. The buttons of a question take no press while
 * nobody can have read it: the second half of a double click would answer what comes in the place of the first.
 */
export const look = `
:root{color-scheme:light dark;${variables(light)}}
@media (prefers-color-scheme:dark){:root{${variables(dark)}}}
*{box-sizing:border-box}
[hidden]{display:none!important}
html{-webkit-text-size-adjust:100%;text-size-adjust:100%;scroll-padding-top:6rem}
body{margin:0;background:var(--paper);color:var(--ink);font:1rem/1.5 system-ui,"Noto Sans","Liberation Sans",sans-serif;
 overflow-wrap:anywhere}
.strip-inner,main,footer{max-width:78rem;margin-inline:auto;padding-inline:1.15rem}
h1,h2{font-family:Charter,"Bitstream Charter","Sitka Text",Cambria,"Noto Serif","Liberation Serif",serif;font-weight:600;
 line-height:1.2;text-wrap:balance;unicode-bidi:isolate}
h1{font-size:2rem;margin:.1rem 0 .2rem}
h2{font-size:1.25rem;margin:0 0 .6rem}
p{margin:.4rem 0;max-width:44rem}
p,li{text-wrap:pretty}
main p,main li,main dd,main td{unicode-bidi:isolate}
:focus-visible{outline:3px solid var(--line-0);outline-offset:3px}
h1,.question h2,.ending h2{width:fit-content;max-width:100%}
h2:focus-visible{outline-offset:.12rem}
h1:focus-visible{outline:0;text-decoration:underline dotted 2px;text-underline-offset:.18em}
.unseen{position:absolute;width:1px;height:1px;overflow:hidden;clip-path:inset(50%);white-space:nowrap}
button,input{font:inherit;color:inherit;min-height:2.75rem;border-radius:0}
button{cursor:pointer;padding:.45rem 1.2rem;border:2px solid var(--ink);background:var(--paper);font-weight:600}
button:hover{background:var(--panel)}
button[aria-disabled=true]{cursor:default;border-style:dashed}
.strip{position:sticky;top:0;z-index:2;background:var(--paper);border-bottom:3px double var(--ink)}
.strip-inner{display:flex;flex-wrap:wrap;align-items:center;justify-content:space-between;gap:.4rem .8rem;padding-block:.5rem}
.load{display:flex;align-items:center;gap:.7rem;margin:0;flex:1 1 8rem;min-width:0}
.contact{width:3.6rem;height:1.8rem;flex:none}
.contact path{fill:none;stroke:currentColor;stroke-width:2.6;stroke-linecap:round}
.contact circle{fill:var(--paper);stroke:currentColor;stroke-width:2}
.load-word{display:block;width:fit-content;font-weight:700;font-size:clamp(1.15rem,2.6vw,1.7rem);line-height:1.2}
.load.on .load-word{background:var(--ink);color:var(--paper);padding:.05em .45em;margin-left:-.1em}
.line{display:block;color:var(--soft);font-size:.85rem;line-height:1.3}
.stop{display:flex;flex-direction:column;align-items:center;justify-content:center;min-width:8rem;min-height:3.4rem;
 padding:.3rem 1.2rem;border:3px solid var(--bad);color:var(--bad);line-height:1.2}
.stop-word{font-size:1.35rem;font-weight:800;letter-spacing:.03em}
.stop-word::before{content:"";display:inline-block;width:.72em;height:.72em;margin-right:.45em;background:currentColor}
.stop-how{font-size:.8rem;font-weight:400}
.stop[aria-disabled=true]{border-color:var(--soft);color:var(--ink)}
.stop[aria-disabled=true] .stop-word{font-size:1.05rem}
main{padding-block:1rem 0}
.kind,.what,.age,.note,.times,.none,.legend{color:var(--soft)}
.kind{margin:0;font-size:.9rem}
.what{margin-top:0;max-width:60rem}
.sheet{display:grid;gap:2.2rem;margin-top:1.6rem}
.sheet>section{min-width:0}
.figures{margin:0;border-top:1.5px solid var(--ink)}
.figure{display:grid;grid-template-columns:minmax(4.5rem,auto) 1fr;align-items:baseline;gap:0 .8rem;padding:.25rem 0 .35rem;
 border-bottom:1px solid var(--rule)}
.figure dt{font-size:.95rem;color:var(--soft)}
.figure dd{margin:0;grid-column:2;text-align:right;white-space:nowrap;font-variant-numeric:tabular-nums lining-nums}
.figure .number{font-size:clamp(2rem,10vw,3.2rem);line-height:1.15;font-weight:600;letter-spacing:-.01em}
.figure.first .number{font-size:clamp(2.6rem,13.5vw,5.6rem)}
.figure .unit{display:inline-block;width:2.2rem;margin-left:.35rem;text-align:left;font-size:1.35rem;color:var(--soft)}
.figure .words{display:inline-block;font-size:1.25rem;line-height:1.3;white-space:normal}
.figure .set{display:block;color:var(--soft);white-space:normal}
.age{min-height:1.5em}
.note:empty,.set:empty{display:none}
.now .age,.now .note,.now .latest{max-width:none}
.latest{color:var(--soft)}
.past .set{display:none}
.past .age{min-height:0}
.past .number{font-weight:400;color:var(--soft)}
.aged .figures{outline:2px dashed var(--bad);outline-offset:.3rem;
 background:repeating-linear-gradient(135deg,transparent 0 9px,var(--panel) 9px 11px)}
.old .age{color:var(--ink);font-weight:600}
.aged .age,.silent .line{color:var(--bad);font-weight:700}
figure{margin:0}
.plot{height:min(22rem,60vh);min-height:15rem;width:100%}
.plot:empty{border:1px dashed var(--rule)}
.plot .uplot{font-family:inherit}
.legend{margin:.3rem 0 0}
.legend span{display:inline-block;margin-right:1.2rem}
.legend svg{width:2.2rem;height:.9rem;margin-right:.4rem;vertical-align:-.1rem;overflow:visible}
.legend path{fill:none;stroke:var(--c);stroke-width:2}
.legend .hollow{fill:var(--paper)}
.k0{--c:var(--line-0)}.k1{--c:var(--line-1)}.k2{--c:var(--bad)}
summary{min-height:2.75rem;padding-block:.6rem;cursor:pointer;text-decoration:underline;text-underline-offset:.2em}
.wide{overflow-x:auto;overflow-wrap:normal}
table{border-collapse:collapse;font-size:.94rem;line-height:1.4;font-variant-numeric:tabular-nums}
th,td{padding:.35rem 1.1rem .35rem 0;text-align:left;border-bottom:1px solid var(--rule);white-space:nowrap}
thead th{font-size:.85rem;color:var(--soft);border-bottom:1.5px solid var(--ink)}
.right{text-align:right}
ol,ul{margin:.4rem 0;padding-left:0;list-style:none;max-width:44rem}
.steps li{display:grid;grid-template-columns:1.6rem 1fr;gap:0 .5rem;padding:.45rem 0;border-bottom:1px solid var(--rule)}
.steps svg{width:1.2rem;height:1.2rem;margin-top:.15rem}
.steps path,.steps circle{fill:none;stroke:currentColor;stroke-width:2.4;stroke-linecap:round;stroke-linejoin:round}
.steps .state{font-size:.85rem;color:var(--soft)}
.steps .at{font-weight:600}
.steps .at .state{color:var(--ink)}
.steps .at svg path{fill:currentColor}
.cautions li,.notices li{padding:.45rem 0;border-bottom:1px solid var(--rule)}
.cautions ol{padding-left:1.5rem;list-style:decimal}
.cautions li li{padding:.1rem 0;border:0}
.cautions strong{display:block}
.cautions .by,.notices time{display:block;font-size:.85rem;color:var(--soft)}
.cautions .waits{color:var(--ink);font-weight:700}
.question{margin:1.2rem 0;padding:1.1rem 1.2rem 1.2rem;background:var(--panel);border:2px solid var(--ink);border-left-width:.6rem}
.question h2{font-size:1.5rem}
.question-text{font-size:1.15rem;line-height:1.5}
.question-text ol{padding-left:1.6rem;list-style:decimal}
.question-text li{margin:.35rem 0}
.question form{display:flex;flex-wrap:wrap;gap:.8rem;margin-top:1rem;align-items:flex-end}
.question button{background:var(--paper);min-height:3.2rem;padding-inline:1.5rem;animation:unread .6s}
@keyframes unread{from,to{pointer-events:none}}
.question button.go{background:var(--ink);color:var(--paper)}
.question button.go:hover{text-decoration:underline}
.field{display:grid;gap:.25rem;flex:1 1 15rem;max-width:30rem}
.field label{font-weight:600}
.field input{min-height:3.2rem;padding:.4rem .7rem;border:2px solid var(--ink);background:var(--paper);font-size:1.25rem;width:100%}
.hint{margin:0;color:var(--soft);font-size:.95rem}
.refused,.unsent{color:var(--bad);font-weight:700}
.refused::before,.unsent::before{content:"! ";font-weight:800}
.answered{padding:.5rem .8rem;border-left:.35rem solid var(--soft);background:var(--panel)}
.lost,.ending{display:grid;grid-template-columns:3.2rem 1fr;gap:0 1.1rem;margin:0 0 1.2rem;padding:1rem 1.2rem;
 background:var(--panel);border:3px solid var(--c);border-left-width:.6rem}
.lost{--c:var(--bad)}
#lost-text p:first-child{font-weight:700;font-size:1.15rem}
.lost h2{font-size:1.5rem;color:var(--c);font-family:inherit;font-weight:700}
.ending{margin-top:1.2rem;border-width:1px;border-left-width:.6rem}
.ending h2{font-size:1.5rem;color:var(--c)}
.good{--c:var(--good)}.bad{--c:var(--bad)}.unsure{--c:var(--unsure)}.plain{--c:var(--soft)}
.ending.bad{border-width:3px;border-left-width:.6rem}
.sign{width:3.2rem;height:3.2rem;color:var(--c)}
.sign .outline{fill:none;stroke:currentColor;stroke-width:4;stroke-linejoin:round}
.sign .mark{fill:none;stroke:currentColor;stroke-width:5;stroke-linecap:round;stroke-linejoin:round}
.safety{font-weight:600}
.unsafe p{margin:.2rem 0}
.safety.unsafe{padding:.6rem .8rem;border:3px solid var(--bad);color:var(--bad);font-size:1.15rem;font-weight:700}
.folder{font-family:ui-monospace,"DejaVu Sans Mono","Liberation Mono",monospace;font-size:.92rem;color:var(--ink)}
footer{margin-top:3rem;padding-block:1rem 2.5rem;color:var(--soft);font-size:.9rem;border-top:1px solid var(--rule)}
@media (min-width:62rem){
.sheet{grid-template-columns:minmax(0,1.65fr) minmax(18rem,1fr);column-gap:3.5rem}
.now{grid-column:1/-1}
.figures{display:grid;grid-template-columns:1.4fr 1.4fr 1fr 1fr;column-gap:2rem;border-bottom:1px solid var(--rule)}
.figure{grid-template-columns:1fr;align-content:start;border-bottom:0;padding-block:.5rem}
.figure dd{grid-column:1;text-align:left}
.figure dd:nth-of-type(1){display:flex;align-items:baseline;white-space:nowrap}
.figure dd:nth-of-type(1)::before{content:"";height:clamp(3.6rem,6.2vw,5.7rem)}
.figure .number{font-size:clamp(2.2rem,3.4vw,3.2rem)}
.figure.first .number{font-size:clamp(3.6rem,6.2vw,5.7rem)}
.number{text-align:right}
}
@media (max-width:30rem){
.plot:empty{display:none}
.strip-inner,main,footer{padding-inline:.9rem}
.stop{min-width:7rem;padding-inline:.7rem}
.contact{width:2.6rem;height:1.3rem}
.load{gap:.5rem}
.lost,.ending{grid-template-columns:1fr;padding:.9rem}
.sign{width:2.4rem;height:2.4rem}
.question{padding:.9rem}
.question form{flex-direction:column;align-items:stretch}
.field{flex-basis:auto}
}
@media (hover:none) and (pointer:coarse){.stop-how{display:none}}
@media (prefers-reduced-motion:no-preference){.stop,.question button{transition:background-color .12s}}
@media (forced-colors:active){.stop-word::before{background:CanvasText}}
@media print{.strip{position:static}.stop,form{display:none}}
`;
