/** Style sheet of reports: readable at 13 inches, on A4, in light and in dark; nothing is loaded and
 * nothing rests on colour alone. */
export const REPORT_STYLE = `
:root { color-scheme: light dark; --ink: #1a1a1a; --paper: #fff; --faint: #6b6b6b; --rule: #c8c8c8;
  --panel: #f4f4f2; }
@media (prefers-color-scheme: dark) {
  :root { --ink: #e6e6e6; --paper: #17181a; --faint: #a3a3a3; --rule: #4a4a4a; --panel: #232528; }
}
* { box-sizing: border-box; }
body { margin: 0 auto; padding: 2rem 1.5rem 4rem; max-width: 60rem; background: var(--paper);
  color: var(--ink); font: 16px/1.5 Georgia, "Times New Roman", "Liberation Serif", serif; }
h1, h2, h3, h4, caption, th, dt, summary, nav, .result-title
  { font-family: Arial, Helvetica, "Liberation Sans", sans-serif; }
h1 { font-size: 1.7rem; line-height: 1.25; margin: 0 0 0.5rem; }
h2 { font-size: 1.25rem; margin: 2.2rem 0 0.6rem; border-bottom: 1px solid var(--rule); }
h3 { font-size: 1.05rem; margin: 1.6rem 0 0.4rem; }
.result-title { font-size: 0.95rem; font-weight: bold; margin: 1rem 0 0.3rem; }
a { color: inherit; }
dl.facts { display: grid; grid-template-columns: max-content 1fr; gap: 0.1rem 1rem; margin: 0.8rem 0;
  font-size: 0.9rem; }
dl.facts dt { color: var(--faint); } dl.facts dd { margin: 0; overflow-wrap: anywhere; }
.notice { border: 1px solid var(--rule); padding: 0.5rem 0.9rem; font-size: 0.9rem; }
table { border-collapse: collapse; margin: 0.6rem 0 1rem; font-size: 0.88rem; display: block;
  overflow-x: auto; }
caption { text-align: left; font-weight: bold; padding: 0.2rem 0; }
th, td { padding: 0.22rem 0.8rem 0.22rem 0; text-align: left; vertical-align: top;
  border-bottom: 1px solid var(--rule); font-variant-numeric: tabular-nums; }
th { font-weight: 600; font-size: 0.84rem; } td small { color: var(--faint); }
.caution { border-left: 0.3rem solid var(--rule); padding: 0.3rem 0.8rem; margin: 0.5rem 0;
  background: var(--panel); font-size: 0.92rem; }
.caution strong { font-weight: normal; }
.caution .severity { font-weight: bold; }
.caution.caution { border-left-style: double; border-left-width: 0.45rem; border-color: var(--ink); }
.caution.serious { border: 0.16rem solid var(--ink); border-left-width: 0.6rem; }
.caution.note { border-left: 0.2rem solid var(--rule); }
figure { margin: 0.8rem 0; } figure svg, figure img { max-width: 100%; height: auto; background: #fff; }
details.code { margin: 0.6rem 0; font-size: 0.85rem; }
details.code summary { cursor: pointer; color: var(--faint); }
pre { background: var(--panel); padding: 0.6rem 0.8rem; overflow-x: auto; white-space: pre-wrap;
  font: 0.82rem/1.45 "DejaVu Sans Mono", Menlo, Consolas, monospace; margin: 0.4rem 0 0.8rem; }
pre.error { border: 0.16rem solid var(--ink); }
math { font-size: 1.1em; font-family: "STIX Two Math", "Cambria Math", "Latin Modern Math",
  "DejaVu Math TeX Gyre", math; } .equation { margin: 0.5rem 0; overflow-x: auto; }
math[display="block"] { margin: 0.4rem 0; text-align: left; }
nav { border-bottom: 1px solid var(--rule); margin-bottom: 1.4rem; padding-bottom: 0.6rem; }
nav ol { margin: 0.3rem 0; padding-left: 1.4rem; }
.left-out { border: 1px dashed var(--faint); padding: 0 0.4rem; font-size: 0.85rem; color: var(--faint); }
.bad-equation { border-bottom: 2px dotted var(--ink); }
.bad-equation::before { content: "not typeset: "; font-style: italic; color: var(--faint); }
@page { size: A4; margin: 18mm 16mm; }
@media print {
  :root { --ink: #000; --paper: #fff; --faint: #444; --rule: #999; --panel: #f4f4f4; }
  body { max-width: none; padding: 0; font-size: 10.5pt; }
  h2, h3, .result-title { break-after: avoid; }
  figure, tr, .caution { break-inside: avoid; }
  table { display: table; } thead { display: table-header-group; }
  pre { padding: 0.2rem 0.8rem; border-left: 2px solid var(--rule); } pre.error { padding: 0.6rem 0.8rem; }
  .caution a { display: none; }
  details.code:not([open]) { display: none; }
}
`;
