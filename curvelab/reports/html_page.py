"""The page around a document's sections: calm on a screen, A4 with page numbers when printed."""

PAGE = """<!doctype html>
<html lang="en-GB">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="generator" content="$program">
<title>$title $name</title>
<style>
@page {
  size: A4; margin: 24mm 18mm 20mm 20mm;
  @top-left { content: "$name"; font: 700 7pt system-ui, sans-serif; color: #2b2f33; }
  @top-right { content: "$title"; font: 7pt system-ui, sans-serif; color: #6a7178; }
  @bottom-left { content: "$program"; font: 7pt system-ui, sans-serif; color: #6a7178; }
  @bottom-right { content: "Page " counter(page) " of " counter(pages); font: 7pt system-ui, sans-serif;
    color: #6a7178; }
}
body { font: 10.5pt/1.45 system-ui, "DejaVu Sans", sans-serif; color: #2b2f33; background: #fff;
  max-width: 52rem; margin: 2.5rem auto; padding: 0 1.5rem; font-variant-numeric: tabular-nums; }
h1 { font-size: 1.9em; margin: 0; overflow-wrap: anywhere; }
h1 + p { color: #6a7178; margin: .2em 0 0; }
h2 { font-size: 1.15em; margin: 2.2em 0 .5em; break-after: avoid; }
h2 span { display: inline-block; min-width: 1.8em; color: #6a7178; }
p { margin: .4em 0; overflow-wrap: anywhere; }
.open { color: #b5521b; }
.quiet { color: #6a7178; }
dl { columns: 2; column-gap: 2em; margin: .4em 0; }
dl div { display: grid; grid-template-columns: 11em 1fr; break-inside: avoid; padding: .05em 0; }
dt { color: #6a7178; }
dd { margin: 0; overflow-wrap: anywhere; }
table { border-collapse: collapse; width: 100%; margin: .6em 0; font-size: .88em; table-layout: fixed;
  border-bottom: 1px solid #a9b0b6; }
thead { display: table-header-group; }
th { border-bottom: 1.5px solid #a9b0b6; text-align: left; }
th, td { padding: .32em .8em .32em 0; vertical-align: top; overflow-wrap: break-word; }
td { border-top: 1px solid #dde1e4; }
tr { break-inside: avoid; }
th.right, td.right { text-align: right; padding-right: 1.4em; }
.beneath td { border-top: 0; padding-top: 0; padding-left: 1.5em; color: #6a7178; font-size: .9em; }
.beneath { break-before: avoid; }
.signatures { border: 0; break-inside: avoid; }
.signatures th { width: 16%; font-weight: 400; color: #6a7178; border: 0; vertical-align: bottom; }
.signatures td { border: 0; border-bottom: 1px solid #2b2f33; height: 3.2em; vertical-align: bottom; font-size: .8em;
  color: #6a7178; border-right: 1em solid #fff; }
figure { margin: .5em 0 1.5em; break-inside: avoid; }
figure svg, figure img { width: 100%; height: auto; max-height: 218mm; display: block; object-fit: contain; }
figcaption { color: #6a7178; font-size: .88em; margin-top: .4em; }
@media print {
  body { max-width: none; margin: 0; padding: 0; font-size: 8.6pt; }
  .plates { break-before: page; }
}
@media (max-width: 40rem) { dl { columns: 1; } }
</style>
</head>
<body>
<header>
<h1>$name</h1>
<p>$title. $subtitle</p>
</header>
$sections
</body>
</html>
"""
