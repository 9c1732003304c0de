#include "report/sheet_style.h"

namespace carboy {

const std::string_view sheet_style = R"css(
:root {
  color-scheme: light dark;
  --paper: #fdfcf9; --ink: #1d1b18; --soft: #635d54; --line: #cfc8bb; --rule: #1d1b18;
  --wash: #f3efe6; --mark: #8c2f1b; --field: #ffffff;
  --serif: "Iowan Old Style", "Palatino Linotype", Palatino, P052, "URW Palladio L", Charter, Georgia, serif;
  --sans: "Avenir Next", Avenir, "Segoe UI", "Helvetica Neue", "Nimbus Sans", Arial, sans-serif;
}
@media (prefers-color-scheme: dark) {
  :root {
    --paper: #171614; --ink: #ece7dd; --soft: #aba396; --line: #45413a; --rule: #aba396;
    --wash: #24221e; --mark: #f2a48c; --field: #201e1b;
  }
}
* { box-sizing: border-box; }
html { background: var(--paper); color: var(--ink); font: 100%/1.45 var(--serif); -webkit-text-size-adjust: 100%; }
body { max-width: 62rem; margin: 0 auto; padding: 1.5rem 1.25rem 2.5rem;
  font-variant-numeric: lining-nums tabular-nums; }
h1, h2, h3, p, ol, ul, dl, dd, table { margin: 0; padding: 0; }
.kicker { display: flex; flex-wrap: wrap; justify-content: space-between; gap: .2rem 1.5rem; color: var(--soft);
  font: .75rem/1.4 var(--sans); letter-spacing: .04em; }
h1 { font-size: 1.75rem; line-height: 1.2; font-weight: 600; margin: .3rem 0 .8rem; text-wrap: balance; overflow-wrap: anywhere; }
h2 { font: 600 .75rem/1.3 var(--sans); letter-spacing: .1em; text-transform: uppercase; color: var(--soft);
  margin: 0 0 .35rem; padding-top: .45rem; border-top: 1.5px solid var(--rule); }
h3 { font: 600 .75rem/1.3 var(--sans); color: var(--soft); margin: .5rem 0 .1rem; }
section { margin-top: 1.15rem; min-width: 0; }
.key { display: grid; grid-template-columns: repeat(auto-fit, minmax(9rem, 1fr)); gap: .5rem 1.5rem; }
.key dt, .result dt, .field label { font: .75rem/1.3 var(--sans); color: var(--soft); }
.key dd { font-size: 1.3rem; line-height: 1.25; font-weight: 600; }
.key .act { padding-left: .7rem; border-left: 3px solid var(--mark); }
.key .act dd, .act .ph { color: var(--mark); }
table { width: 100%; border-collapse: collapse; }
caption { position: absolute; width: 1px; height: 1px; overflow: hidden; clip-path: inset(50%); }
thead th { font: .75rem/1.3 var(--sans); color: var(--soft); text-align: left; padding: .1rem .5rem .2rem 0; vertical-align: bottom; }
tbody th, td { text-align: left; font-weight: 400; padding: .3rem .5rem .3rem 0; border-top: 1px solid var(--line); vertical-align: baseline; }
tbody th b { font-weight: 600; }
tbody th span { display: block; font-size: .8rem; color: var(--soft); line-height: 1.3; }
th.figure, td.figure { text-align: right; padding-right: 1rem; white-space: nowrap; }
td.target { font-size: 1.2rem; font-weight: 600; line-height: 1.2; }
td.range { font-size: .85rem; color: var(--soft); white-space: nowrap; }
td.ph { font-size: 1.15rem; font-weight: 600; line-height: 1.2; }
td.blank { width: 13%; } td.blank.short { width: 8%; } td.blank:last-child { padding-right: 0; }
tr.act { background: var(--wash); }
sub { font-size: .75em; line-height: 0; }
input { font: inherit; color: inherit; }
input[type=text] { width: 100%; min-width: 2rem; height: 1.7em; padding: 0 .2rem; background: var(--field);
  border: 0; border-bottom: 1px solid var(--soft); border-radius: 0; }
input:focus-visible { outline: 2px solid var(--mark); outline-offset: 1px; }
input[type=checkbox] { appearance: none; flex: none; width: 1.05em; height: 1.05em; margin: .2em .6em 0 0; border: 1.3px solid var(--ink);
  border-radius: 2px; background: var(--field); }
input[type=checkbox]:checked { background: var(--ink); box-shadow: inset 0 0 0 .18em var(--field); }
.columns { display: grid; grid-template-columns: minmax(0, 7fr) minmax(0, 5fr); gap: 0 2rem; }
ol.steps { list-style: none; counter-reset: step; }
ol.steps li { counter-increment: step; display: flex; align-items: flex-start; padding: .2rem 0; }
ol.steps label { flex: 1; }
ol.steps label::before { content: counter(step) ". "; font-weight: 600; }
.fields { display: grid; grid-template-columns: repeat(auto-fill, minmax(9.5rem, 1fr)); gap: .45rem 1.2rem; margin-top: .4rem; }
.result { display: grid; grid-template-columns: auto 1fr; gap: .15rem 1rem; align-items: baseline; }
.result dd { text-align: right; }
.result dt:first-child + dd { font-weight: 600; }
.small { font-size: .85rem; line-height: 1.4; color: var(--soft); margin-top: .3rem; }
.notes, .cautions { list-style: none; font-size: .9rem; line-height: 1.4; }
.notes li { padding: .15rem 0 .15rem .8rem; border-left: 3px solid var(--mark); margin-bottom: .3rem; }
.cautions { columns: 2; column-gap: 2rem; }
.cautions li { break-inside: avoid; padding: .12rem 0; }
.cautions b { font-weight: 600; }
.signal { font: 600 .75em/1 var(--sans); letter-spacing: .05em; color: var(--mark); }
.code { font: .82em/1 var(--sans); color: var(--soft); }
footer { margin-top: 1.4rem; padding-top: .45rem; border-top: 1px solid var(--line); color: var(--soft); font: .72rem/1.45 var(--sans); overflow-wrap: anywhere; }
@media screen and (max-width: 46rem) {
  body { padding: 1rem 1rem 2rem; }
  h1 { font-size: 1.45rem; }
  .columns { display: block; }
  .cautions { columns: 1; }
  .portions thead { position: absolute; width: 1px; height: 1px; overflow: hidden; clip-path: inset(50%); }
  .key { grid-template-columns: 1fr 1fr; }
  .key div:last-child { grid-column: 1 / -1; }
  .portions tr { display: grid; grid-template-columns: 3fr 3fr 2fr; gap: 0 1rem; padding: .5rem 0; border-top: 1px solid var(--line); }
  .portions tbody th, .portions td { border: 0; padding: .1rem 0; width: auto; }
  .portions tbody th { grid-column: 1 / -1; }
  .portions td.figure { text-align: left; }
  .portions td.range { grid-column: 2 / -1; align-self: end; }
  .portions td.blank { width: auto; display: grid; }
  .portions td.blank::before { content: attr(data-name); font: .72rem/1.3 var(--sans); color: var(--soft); }
}
@page { margin: 9mm 12mm; }
@media print {
  :root { color-scheme: light; --paper: #fff; --ink: #000; --soft: #47433d; --line: #bdb6a9; --rule: #000; --wash: #f3efe6;
    --mark: #8c2f1b; --field: transparent; }
  html { font-size: 9.4pt; line-height: 1.3; print-color-adjust: exact; -webkit-print-color-adjust: exact; }
  html.long { font-size: 8.8pt; }
  html.longer { font-size: 8.1pt; }
  html.longest { font-size: 7.2pt; }
  body { max-width: none; padding: 0; }
  h1 { margin: .2rem 0 .5rem; }
  section { margin-top: .75rem; }
  h2 { padding-top: .3rem; margin-bottom: .2rem; }
  tbody th, td { padding-top: .2rem; padding-bottom: .2rem; }
  tr, .steps li, .notes li, .field, .record { break-inside: avoid; }
  .steps li { padding: .12rem 0; }
  .notes, .cautions { line-height: 1.28; }
  .cautions { font-size: .84rem; columns: 2; }
  input[type=text] { height: 1.5em; }
  .fields { grid-template-columns: repeat(5, 1fr); gap: .3rem 1rem; margin-top: .25rem; }
  .columns .fields { grid-template-columns: repeat(2, 1fr); }
  footer { margin-top: .7rem; padding-top: .3rem; }
}
)css";

}  // namespace carboy
