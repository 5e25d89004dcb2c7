package report

// Style is the style sheet that HTML writes where it is given none. Colours
// are few, from the set of Okabe and Ito (Color Universal Design, 2008):
// blue #0072b2 and vermilion #d55e00; none carries a meaning alone.
const Style = `
:root { color: #1a1a1a; background: #fff; font: 16px/1.5 "Liberation Sans", Arimo, Arial, Helvetica, sans-serif; }
body { margin: 0; }
main { max-width: 46rem; margin: 0 auto; padding: 2rem 1.25rem 4rem; overflow-wrap: break-word; }
h1, h2, h3, h4, h5, h6 { line-height: 1.25; margin: 1.8em 0 .5em; break-after: avoid; }
h1 { font-size: 1.7rem; margin-top: 0; }
h2 { font-size: 1.3rem; padding-bottom: .2em; border-bottom: 1px solid #b3b3b3; }
h3 { font-size: 1.1rem; }
h4, h5, h6 { font-size: 1rem; }
p, ul, ol, pre, blockquote, figure { margin: .8em 0; }
p { orphans: 3; widows: 3; }
li > p { margin: .4em 0; }
li > ul, li > ol { margin: 0; }
li.task { list-style: none; }
li.task > input { appearance: none; box-sizing: border-box; width: .85em; height: .85em; margin: 0 .35em 0 -1.4em; border: 1.5px solid #1a1a1a; vertical-align: -.05em; }
li.task > input:checked { background: #1a1a1a; box-shadow: inset 0 0 0 1.5px #fff; print-color-adjust: exact; }
a { color: #0072b2; text-underline-offset: .15em; }
sub, sup { line-height: 0; font-size: .75em; }
sup.ref a { text-decoration: none; padding: 0 .1em; }
code, pre { font-family: "Liberation Mono", Cousine, "Courier New", Courier, monospace; font-size: .9em; }
pre { padding: .7em .9em; border: 1px solid #d0d0d0; background: #f6f6f6; line-height: 1.4; overflow-x: auto; }
blockquote { margin-left: 0; padding: .05em 1em; border-left: 3px solid #b3b3b3; color: #404040; }
hr { border: 0; border-top: 1px solid #b3b3b3; margin: 2em 0; }
figure { text-align: center; }
figure > svg, figure > img { max-width: 100%; height: auto; }
figcaption { font-size: .9em; margin-top: .5em; text-align: left; }
.formula { margin: .8em 0; padding: .2em 0; font-size: 1.1em; overflow: auto hidden; }
math { font-family: "STIX Two Math", "Latin Modern Math", "Cambria Math", math; }
mi, mn, mo, mtext { font-family: "Liberation Serif", Tinos, "Times New Roman", Times, serif; }
mi { font-style: italic; }
.sum { font-size: 1.6em; padding: .06em 0; }
.bar { padding-bottom: .18em; }
mfrac > :first-child { padding-bottom: .12em; }
mfrac > :last-child { padding-top: .12em; }

table { border-collapse: collapse; font-variant-numeric: tabular-nums; }
th, td { padding: .3em .7em; text-align: left; vertical-align: top; }
caption { text-align: left; font-weight: bold; padding: 0 0 .4em; }
.data { margin: 1.2em 0; overflow-x: auto; }
.data > table { border-top: 1.5px solid #1a1a1a; border-bottom: 1.5px solid #1a1a1a; }
.data caption { caption-side: top; font-size: .9em; }
.data thead th { border-bottom: 1px solid #1a1a1a; vertical-align: bottom; }
.data td { border-bottom: 1px solid #e4e4e4; }
.data tr:last-child > td { border-bottom: 0; }
.data .right { text-align: right; white-space: nowrap; }
.data th.right { white-space: normal; }
.data .centre { text-align: center; }
.data .full { width: 100%; }
.data .wide { width: 60%; }
.data .marked > td { background: #e8e8e8; font-weight: bold; print-color-adjust: exact; }
.data .total > td { border-top: 1px solid #1a1a1a; font-weight: bold; }
.data .note { font-size: .85em; margin: .35em 0 0; color: #404040; }
.compact { font-size: .8em; }
.compact th, .compact td { padding: .12em .6em; }
.right > span { display: inline-block; text-align: left; }
.tail1 { min-width: 1ch; } .tail2 { min-width: 2ch; } .tail3 { min-width: 3ch; } .tail4 { min-width: 4ch; }
.tail5 { min-width: 5ch; } .tail6 { min-width: 6ch; } .tail7 { min-width: 7ch; } .tail8 { min-width: 8ch; }
.tail9 { min-width: 9ch; } .tail10 { min-width: 10ch; } .tail11 { min-width: 11ch; } .tail12 { min-width: 12ch; }

header { border-bottom: 1.5px solid #1a1a1a; margin-bottom: 1.5em; padding-bottom: 1em; }
.fields th, .summary th { font-weight: normal; color: #404040; padding-left: 0; white-space: nowrap; }
.fields th, .fields td { padding-top: .1em; padding-bottom: .1em; }
.summary { width: 100%; margin: 1.2em 0; border: 1.5px solid #1a1a1a; border-collapse: separate; border-spacing: 0; padding: .5em .9em; }
.summary caption { padding-bottom: .3em; }
.summary th, .summary td { padding: .2em .7em .2em 0; }
.summary td { width: 100%; }
.summary .answer > * { vertical-align: baseline; padding-bottom: .4em; }
.summary .answer > td { font-size: 1.7em; line-height: 1.1; }
.caution { margin: 1.2em 0; padding: .1em 1em; border: 1px solid #d55e00; border-left-width: 6px; }
.sign-off { width: 100%; margin: 1.2em 0; font-size: .9em; }
.sign-off th, .sign-off td { border: 1px solid #808080; }
.sign-off tbody > tr { height: 4.5em; }
.sign-off tbody th { font-weight: normal; }
.sign-off thead th:nth-child(2), .sign-off thead th:nth-child(n+5) { width: 17%; }
.sign-off tbody th, .sign-off td:nth-child(4) { white-space: nowrap; }
.sign-off td.seal { height: 9em; }
.footnotes { margin-top: 3em; border-top: 1px solid #b3b3b3; font-size: .9em; }
.footnotes :target, sup.ref a:target { outline: 2px solid #0072b2; }

@page { margin: 20mm 18mm; @bottom-right { content: counter(page) " / " counter(pages); font-size: 8pt; } }
@media print {
  :root { font-size: 10pt; }
  main { max-width: none; padding: 0; }
  a { color: inherit; }
  thead { display: table-header-group; }
  tr, figure, pre, .formula, .summary, .caution, .sign-off, .data { break-inside: avoid; }
  .data, .formula, pre { overflow: visible; }
  pre { white-space: pre-wrap; overflow-wrap: anywhere; }
  .data.compact { break-inside: auto; }
  .page-break { break-after: page; }
}
`
