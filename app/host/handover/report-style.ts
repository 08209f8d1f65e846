/** Paper and ink; colours from Okabe and Ito (2008): blue for what was fitted, vermillion for sparks. */
export const reportStyle = `
:root { color-scheme: light; }
* { box-sizing: border-box; }
body { margin: 0 auto; max-width: 46rem; padding: 2rem 1.5rem; background: #fbfaf5; color: #1a1a18;
  font: 15px/1.45 Georgia, "DejaVu Serif", serif; }
header { border-bottom: 1px solid #1a1a18; margin-bottom: 1rem; }
h1 { font-size: 1.6rem; font-weight: normal; margin: 0; }
header p { margin: .2rem 0 .6rem; color: #55534c; }
h2 { font-size: 1.05rem; margin: 1.8rem 0 .4rem; border-bottom: 1px solid #d8d5c8; font-weight: normal; }
.counts { font-size: 1.15rem; }
.quiet, figcaption, footer { color: #55534c; font-size: .85rem; }
table { border-collapse: collapse; width: 100%; font-size: .82rem; font-variant-numeric: tabular-nums; }
th { text-align: left; font-weight: normal; color: #55534c; border-bottom: 1px solid #1a1a18; }
td, th { padding: .18rem .6rem .18rem 0; vertical-align: top; overflow-wrap: anywhere; }
tr + tr td { border-top: 1px solid #e6e3d8; }
.log td, .log th { white-space: nowrap; overflow-wrap: normal; }
.log td.name { white-space: normal; overflow-wrap: anywhere; padding-bottom: 0; }
.log tr:has(.name) + tr td { border-top: 0; }
.files td, .files th { white-space: nowrap; }
.files td:first-child, .files td:last-child { white-space: normal; }
.files td:last-child { min-width: 17rem; }
.log td.why { white-space: normal; border-top: 0; padding: 0 0 .3rem 1.2rem; color: #55534c; font-size: .95em; }
.log tbody { break-inside: avoid; }
.log tbody + tbody td:not(.why) { border-top: 1px solid #e6e3d8; }
.hash { font: .68rem/1.3 "DejaVu Sans Mono", monospace; }
figure { margin: 1rem 0; break-inside: avoid; }
figcaption b { color: #1a1a18; font-weight: normal; }
svg { width: 100%; height: auto; }
svg path { fill: none; stroke-linejoin: round; }
svg text, svg text.quiet { font: 11px Georgia, "DejaVu Serif", serif; fill: #55534c; }
svg .ink { stroke: #1a1a18; stroke-width: .8; }
svg .fit { stroke: #0072b2; stroke-width: 1.6; }
svg line { stroke: #b5b2a5; stroke-width: .8; }
svg line.spark { stroke: #d55e00; stroke-dasharray: 2 2; }
svg text.spark { fill: #b34f00; }
svg line.grid { stroke: #e6e3d8; stroke-width: .6; }
svg .rule { stroke-dasharray: 1 3; }
footer { margin-top: 2rem; border-top: 1px solid #1a1a18; padding-top: .4rem; }
@media print {
  @page { margin: 16mm; }
  body { max-width: none; padding: 0; background: none; }
  thead { display: table-header-group; }
  tr { break-inside: avoid; }
  h2 { break-after: avoid; }
}`;
