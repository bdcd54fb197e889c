/** The report's style sheet: one column of text, figures beside each other where there is room, both colour schemes, paper. */

export const STYLE = `
:root {
  color-scheme: light dark;
  --paper: #fdfdfb; --ink: #1c1e21; --soft: #5c6168; --rule: #d9dad6; --wash: #f3f3ef;
  --c1: #0063a6; --c2: #b84a00; --c3: #00795a; --c4: #8a3d78;
  --serif: Charter, "Bitstream Charter", "Iowan Old Style", "Palatino Linotype", "Source Serif 4", Georgia, "Liberation Serif", "DejaVu Serif", serif;
  --sans: "Source Sans 3", "Helvetica Neue", Helvetica, "Segoe UI", Roboto, "Liberation Sans", Arial, sans-serif;
  --mono: ui-monospace, "SF Mono", Menlo, Consolas, "Liberation Mono", "DejaVu Sans Mono", monospace;
}
@media (prefers-color-scheme: dark) {
  :root {
    --paper: #16181b; --ink: #e4e4e0; --soft: #a2a7ad; --rule: #393d42; --wash: #1f2226;
    --c1: #66b3e8; --c2: #f0a05a; --c3: #4cc7a0; --c4: #d79cc7;
  }
}
* { box-sizing: border-box; }
html { -webkit-text-size-adjust: 100%; text-size-adjust: 100%; }
body { margin: 0; background: var(--paper); color: var(--ink); font: 1.0625rem/1.55 var(--serif); font-variant-numeric: lining-nums; }
header.title, main, footer.colophon { max-width: 46rem; margin: 0 auto; padding: 0 1.25rem; }
header.title { padding-top: 3.2rem; }
h1, h2, h3 { font-weight: 600; line-height: 1.2; text-wrap: balance; overflow-wrap: anywhere; }
h1 { font-size: 2rem; margin: .2rem 0 .6rem; letter-spacing: -.01em; }
h2 { font-size: 1.42rem; margin: 3.4rem 0 .8rem; padding-top: 1rem; border-top: 1px solid var(--rule); }
h3 { font-size: 1.1rem; margin: 2rem 0 .5rem; }
p { margin: .6rem 0; max-width: 40rem; }
a { color: inherit; text-decoration-color: var(--soft); text-underline-offset: .15em; }
.kicker, .facts, nav, figcaption, table, .note, .standing, .verdict, dt { font-family: var(--sans); }
.kicker { font-size: .82rem; letter-spacing: .08em; text-transform: uppercase; color: var(--soft); margin: 0; }
.facts { color: var(--soft); font-size: .9rem; margin: 0; }
nav { font-size: .9rem; margin: 1.4rem 0 0; color: var(--soft); }
nav a { white-space: nowrap; margin-right: .9em; }
nav a, nav a:visited { color: var(--soft); }
strong, .value { font-weight: 600; }
.value { font-variant-numeric: lining-nums tabular-nums; white-space: nowrap; }
.value.text { white-space: normal; overflow-wrap: anywhere; }
.standing { color: var(--soft); font-size: .86em; }
.standing .interval { white-space: nowrap; }
@media (max-width: 34rem) { .standing .interval { white-space: normal; } }
.verdict { font-weight: 600; font-size: .92em; white-space: nowrap; }
.verdict::before { display: inline-block; width: 1.15em; font-weight: 700; }
.verdict.holds::before { content: "\\2713"; color: var(--c3); }
.verdict.fails::before { content: "\\2717"; color: var(--c2); }
.verdict.undecided::before { content: "?"; color: var(--soft); }
dl.answers { margin: 1.2rem 0 0; }
dl.answers > div { display: grid; grid-template-columns: 12.5rem minmax(0, 1fr); gap: .2rem 1.6rem; padding: .85rem 0; border-top: 1px solid var(--rule); break-inside: avoid; }
dl.answers > div:last-child { border-bottom: 1px solid var(--rule); }
dl.answers dt { font-size: .95rem; font-weight: 600; line-height: 1.4; padding-top: .12rem; }
dl.answers dt a { text-decoration: none; } dl.answers dt a:hover { text-decoration: underline; }
dl.answers dd { margin: 0; }
dl.answers dd p { margin: 0 0 .35rem; }
dl.answers dd p:last-child { margin-bottom: 0; }
dl.answers .tabled { margin: 0; } dl.answers table { min-width: 0; width: 100%; }
dl.plain { font-size: .92rem; font-family: var(--sans); display: grid; grid-template-columns: minmax(min-content, max-content) minmax(0, 1fr); gap: .25rem 1.2rem; margin: .8rem 0; }
dl.plain dl.plain { margin: 0 0 .5rem; }
dl.plain dt { color: var(--soft); } dl.plain dd { margin: 0; overflow-wrap: anywhere; }
.scroll { overflow-x: auto; margin: 1rem 0; max-width: 100%; }
table { border-collapse: collapse; font-size: .89rem; line-height: 1.4; font-variant-numeric: lining-nums tabular-nums; min-width: min(100%, 30rem); }
.tabled { margin: 1.1rem 0; } .tabled .scroll { margin: 0; }
p.caption { font: .89rem/1.45 var(--sans); color: var(--soft); margin: 0 0 .3rem; max-width: 42rem; }
th, td { text-align: left; vertical-align: baseline; padding: .32rem 1.1rem .32rem 0; border-bottom: 1px solid var(--rule); }
th { font-weight: 600; color: var(--soft); vertical-align: bottom; }
thead th { border-bottom: 1px solid var(--soft); }
tbody th { color: var(--ink); font-weight: 500; vertical-align: baseline; }
td.n, th.n { text-align: right; } td.n .standing { display: block; }
td .standing { font-size: .88em; }
th .standing { display: block; font-weight: 400; white-space: nowrap; }
figure { margin: 1.6rem 0; break-inside: avoid; }
figcaption { font-size: .88rem; line-height: 1.45; color: var(--soft); margin-top: .35rem; max-width: 42rem; }
figcaption b { color: var(--ink); font-weight: 600; }
figure svg { display: block; max-width: 100%; height: auto; overflow: visible; font-family: var(--sans); font-variant-numeric: tabular-nums; color: var(--ink); }
figure svg.narrow { display: none; }
.pair { display: grid; grid-template-columns: repeat(auto-fit, minmax(min(100%, 19rem), 1fr)); gap: 0 1.6rem; align-items: start; }
sub, sup { font-size: .72em; line-height: 0; }
@media screen and (max-width: 40rem) { figure svg.wide { display: none; } figure svg.narrow { display: block; } }
.warning { border-left: 3px solid var(--c2); padding: .1rem 0 .1rem .9rem; margin: .9rem 0; font-size: .96rem; }
.warning b { font-family: var(--sans); font-size: .88em; }
.note { font-size: .9rem; color: var(--soft); line-height: 1.5; }
.matrices { display: flex; flex-wrap: wrap; gap: 1.3rem 2.4rem; margin: 1rem 0; }
.matrices.tight { gap: .6rem 1rem; margin: 0; }
.move { break-inside: avoid; max-width: 100%; }
.move .name { font: 600 .92rem/1.35 var(--sans); margin: 0; overflow-wrap: anywhere; max-width: 18rem; }
.move .chance { font: .86rem/1.35 var(--sans); color: var(--soft); margin: 0 0 .35rem; }
.formula { display: flex; align-items: center; gap: .55rem; overflow-x: auto; }
.matrix { display: inline-grid; gap: .1rem .85rem; padding: .15rem .55rem; position: relative; text-align: right; font-variant-numeric: lining-nums tabular-nums; }
.matrix::before, .matrix::after { content: ""; position: absolute; top: 0; bottom: 0; width: .32rem; border: 1.3px solid currentColor; }
.matrix::before { left: 0; border-right: 0; } .matrix::after { right: 0; border-left: 0; }
pre, code { font-family: var(--mono); font-size: .86em; }
pre { background: var(--wash); padding: .8rem 1rem; overflow-x: auto; border-radius: 3px; line-height: 1.5; }
pre.evidence { white-space: pre-wrap; overflow-wrap: anywhere; }
details { margin: .7rem 0; } summary { cursor: pointer; font: .9rem var(--sans); color: var(--soft); }
footer.colophon { margin-top: 4rem; padding-bottom: 3rem; font: .86rem/1.5 var(--sans); color: var(--soft); }
@media (max-width: 34rem) {
  body { font-size: 1rem; }
  header.title { padding-top: 1.8rem; }
  header.title, main, footer.colophon { padding-left: 1rem; padding-right: 1rem; }
  h1 { font-size: 1.6rem; }
  dl.answers > div { grid-template-columns: minmax(0, 1fr); }
  th .standing { white-space: normal; }
  th, td { padding-right: .8rem; }
  dl.plain { grid-template-columns: minmax(0, 1fr); gap: 0; } dl.plain dd { margin-bottom: .5rem; }
}
@media print {
  :root { color-scheme: light; --paper: #fff; --ink: #000; --soft: #444; --rule: #bbb; --wash: #f4f4f4; --c1: #00568f; --c2: #a34200; --c3: #00684e; --c4: #7a3168; }
  @page { margin: 18mm 16mm; }
  html { font-size: 9.4pt; }
  header.title { padding-top: 0; } nav { display: none; }
  header.title, main, footer.colophon { max-width: none; padding: 0; }
  h2, h3, p.caption { break-after: avoid; } h2 { margin-top: 1.8rem; }
  tr, .warning, pre, .matrices.tight { gap: .6rem 1rem; margin: 0; }
.move { break-inside: avoid; }
  .scroll, .formula, pre { overflow: visible; }
  pre { white-space: pre-wrap; }
  figure svg.wide { max-height: 11cm; width: auto; }
}
`;
