-- SPDX-License-Identifier: GPL-3.0-or-later
-- How the page of a report looks: one column of text in the reader's own fonts, wide things in boxes that scroll, light or dark as the reader
-- has it, and on paper everything unfolded in black on white. The three colours of answers differ in lightness, for those who see no hues.
return [[
:root { --paper: #fdfdfb; --ink: #1d1f21; --soft: #55585c; --line: #c9cbc7; --box: #f1f2ee; --link: #14558f;
  --yes: #0f6a8b; --between: #d59a2a; --no: #8d8f92; --missing: #d9dad6; --yes-tint: #d5eaf2; --between-tint: #faebcb; }
@media (prefers-color-scheme: dark) { :root { --paper: #17191b; --ink: #e6e6e2; --soft: #a9adb1; --line: #43474b; --box: #22262a; --link: #8cc2ef;
  --yes: #4fb0d2; --between: #e0b04f; --no: #75797d; --missing: #33373b; --yes-tint: #123c4b; --between-tint: #4a3a12; } }
* { box-sizing: border-box; }
body { margin: 0 auto; padding: 1rem 1.2rem 3rem; max-width: 68rem; background: var(--paper); color: var(--ink);
  font: 1rem/1.5 system-ui, sans-serif; overflow-wrap: break-word; }
h1 { font-size: 1.6rem; line-height: 1.25; margin: 0.5rem 0; }
h2 { font-size: 1.25rem; margin: 2.4rem 0 0.6rem; padding-top: 0.5rem; border-top: 1px solid var(--line); }
h3 { font-size: 1.05rem; margin: 1.4rem 0 0.4rem; }
a { color: var(--link); }
nav ul { list-style: none; display: flex; flex-wrap: wrap; gap: 0.3rem 1.1rem; padding: 0; margin: 0.5rem 0; }
.small, .unit, figcaption { font-size: 0.875rem; color: var(--soft); }
.unit { font-weight: normal; }
.answers { display: grid; grid-template-columns: repeat(auto-fit, minmax(min(20rem, 100%), 1fr)); gap: 1rem; }
.answer { background: var(--box); padding: 0.7rem 1rem; border-radius: 4px; }
.answer p { margin: 0.3rem 0; }
.question { font-weight: 600; }
.answer dl { margin: 0.4rem 0; }
.answer dt { font-size: 0.875rem; font-weight: 600; }
.answer dd { margin: 0 0 0.4rem 1.2rem; }
.bar { display: flex; height: 0.6rem; gap: 2px; }
.key { display: inline-block; width: 0.7rem; height: 0.7rem; margin-right: 0.5rem; }
.bar .yes, .key.yes { background: var(--yes); }
.bar .between, .key.between { background: var(--between); }
.bar .no, .key.no { background: var(--no); }
.bar .missing, .key.missing { background: var(--missing); border: 1px solid var(--soft); }
.scroll, pre { overflow-x: auto; max-width: 100%; }
.scroll { margin: 0.6rem 0; }
table { border-collapse: collapse; font-size: 0.9rem; font-variant-numeric: tabular-nums; }
th, td { padding: 0.25rem 0.6rem; text-align: left; vertical-align: top; border-bottom: 1px solid var(--line); }
thead th { vertical-align: bottom; border-bottom: 2px solid var(--soft); }
th.group { text-align: center; border-bottom-width: 1px; }
.results .number, .results th.number { text-align: right; }
.results td.number, .values td, .results tbody th, .values tbody th { white-space: nowrap; }
td.text { min-width: 14rem; }
.words td, .words th { min-width: 8rem; }
tbody th { font-weight: 600; }
.results tbody th, .values tbody th { position: sticky; left: 0; background: var(--paper); }
td.yes { background: var(--yes-tint); }
td.between { background: var(--between-tint); }
details { margin: 0.4rem 0; padding: 0.3rem 0.8rem; border: 1px solid var(--line); border-radius: 4px; }
summary { cursor: pointer; }
.steps li { margin: 0.8rem 0; }
.steps p { margin: 0.15rem 0; }
.equation { overflow: auto hidden; padding: 0.35rem 0 0.35rem 1.2rem; }
math { font-size: 1.1rem; math-style: normal; }
pre { background: var(--box); padding: 0.8rem; font-size: 0.85rem; line-height: 1.4; }
.draft { background: var(--box); padding: 0.2rem 1rem; border-radius: 4px; }
figure { margin: 1rem 0; }
figure svg { display: block; width: 38rem; max-width: 100%; height: auto; }
@media (max-width: 40rem) {
  .words thead { display: none; }
  .words, .words tbody, .words tr, .words th, .words td { display: block; }
  .words tr { border-bottom: 1px solid var(--line); padding: 0.3rem 0; }
  .words th, .words td { border: 0; padding: 0.1rem 0; }
}
@media print {
  :root { --paper: #fff; --ink: #000; --soft: #333; --line: #999; --box: #fff; --link: #000; --yes-tint: #fff; --between-tint: #fff; }
  body { max-width: none; padding: 0; font-size: 10pt; }
  nav { display: none; }
  details::details-content { content-visibility: visible; display: block; }
  .scroll, .equation, pre { overflow: visible; }
  pre { white-space: pre-wrap; }
  .results, .values { font-size: 6.5pt; }
  .unit { font-size: inherit; }
  .results th, .results td, .values th, .values td { padding: 1pt 3pt; min-width: 0; }
  .results td.number, .values td { white-space: normal; }
}
]]
