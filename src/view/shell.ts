/**
 * The page before anything is known: its landmarks, headings and places, in the order in which the keyboard and a
 * reader go through them. It holds no text of a run; what fills it is `page/main.ts`, as text alone.
 *
 * Three places speak up by themselves: `alarm` at once, for what is asked and what may hurt; `status` when there is
 * a pause, for steps and for what became of an answer; the notices as a log. The figures never do: they are there to
 * be read when somebody wants them.
 */
export const shell = `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="referrer" content="no-referrer">
<title>Live view · railproof</title>
<link rel="icon" href="/mark.svg" type="image/svg+xml">
<link rel="stylesheet" href="/uplot.css">
<link rel="stylesheet" href="/look.css">
<script type="module" src="/page/main.js"></script>
</head>
<body>
<header class="strip">
<div class="strip-inner">
<p class="load" id="load"><svg class="contact" id="contact" viewBox="0 0 48 24" aria-hidden="true"></svg><span><span class="load-word" id="load-word">Load: not known yet</span><span class="line" id="line">connecting…</span></span></p>
<button type="button" class="stop" id="stop" aria-describedby="stop-how"><span class="stop-word" id="stop-word">Stop</span><span class="stop-how" id="stop-how">or Esc twice</span></button>
</div>
</header>
<main>
<div class="unseen" id="alarm" role="alert"></div>
<div class="unseen" id="status" role="status"></div>
<noscript><p>This page needs scripts to follow the run. The terminal shows the same, and asks the same.</p></noscript>
<section class="lost" id="lost" aria-labelledby="lost-heading" hidden>
<svg class="sign" viewBox="0 0 60 60" aria-hidden="true"><path class="outline" d="M30 5L57 54H3Z"/><path class="mark" d="M30 22V38M30 46v1"/></svg>
<div><h2 id="lost-heading"></h2><div id="lost-text"></div></div>
</section>
<p class="kind" id="kind">Live view</p>
<h1 id="module" tabindex="-1">Waiting for the runner</h1>
<p class="what" id="what"></p>
<p class="unsent" id="trouble" hidden></p>
<section class="question" id="question" aria-labelledby="question-heading" hidden>
<h2 id="question-heading" tabindex="-1"></h2>
<div class="question-text" id="question-text"></div>
<form id="question-form" novalidate></form>
<p class="refused" id="question-error" hidden></p>
</section>
<p class="answered" id="answered" hidden></p>
<section class="ending" id="ending" aria-labelledby="ending-heading" hidden>
<svg class="sign" id="ending-sign" viewBox="0 0 60 60" aria-hidden="true"></svg>
<div><h2 id="ending-heading" tabindex="-1"></h2><div id="ending-text"></div><p id="ending-busy" hidden></p></div>
</section>
<div class="sheet">
<section class="now" aria-labelledby="figures-heading">
<h2 id="figures-heading">Now</h2>
<dl class="figures" id="figures"></dl>
<p class="age" id="age"></p>
<p class="note" id="note"></p>
<p class="latest" id="latest" hidden></p>
</section>
<section class="curve" aria-labelledby="curve-heading">
<h2 id="curve-heading">Curve</h2>
<figure>
<div class="plot" id="plot" role="img" aria-labelledby="curve-heading" aria-describedby="curve-words"></div>
<figcaption><p class="legend" id="legend"></p><p id="curve-words">No points so far.</p></figcaption>
</figure>
<details id="last-points" hidden><summary>The last points as a table</summary>
<div class="wide" id="points" role="region" aria-label="The last points" tabindex="0"></div>
</details>
</section>
<section class="way" aria-labelledby="steps-heading">
<h2 id="steps-heading">Steps</h2>
<p id="step-now"></p>
<p class="times" id="times"></p>
<ol class="steps" id="steps"></ol>
</section>
<section class="taken-note" id="cautions-section" aria-labelledby="cautions-heading" hidden>
<h2 id="cautions-heading">Cautions</h2>
<ul class="cautions" id="cautions"></ul>
</section>
<section class="said" id="notices-section" aria-labelledby="notices-heading" hidden>
<h2 id="notices-heading">Notices</h2>
<div role="log" aria-labelledby="notices-heading"><ol class="notices" id="notices"></ol></div>
</section>
</div>
</main>
<footer>
<p id="about-stop"><strong>Stop</strong>, or Esc pressed twice within a second, has the runner switch the load off and read it back, without asking again. It is not an emergency stop: where there is danger, cut the power by hand.</p>
<p id="about-page">This page only shows, answers and stops; everything else is done at the terminal that it was opened from.</p>
</footer>
</body>
</html>
`;

/** Where several windows are open: a contact that closes a line, as the page has it for the load. */
export const mark = `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 32 32"><path d="M0 0H32V32H0Z" fill="#fdfcf9"/><path d="M1 21H9M23 21H31M10 20L22 9" fill="none" stroke="#1c2226" stroke-width="3" stroke-linecap="round"/><path d="M6 21a3 3 0 1 0 6 0a3 3 0 1 0 -6 0M20 21a3 3 0 1 0 6 0a3 3 0 1 0 -6 0" fill="#a3241c"/></svg>`;

/** What the page imports beside `page` and the view's state: served as `/` and this name, from the same place in dist. */
export const sharedModules = [
  'quantity/printable.js',
  'quantity/spoken-time.js',
  'quantity/typed-as.js',
] as const;
