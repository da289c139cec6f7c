//! The style sheet of a page: light and dark, phone, A4 and Letter.

use picture::style;

/// The whole sheet.
pub(super) fn text() -> String {
    let [light, dark] = [style::properties(false), style::properties(true)];
    let pictures = style::for_a_page();
    format!(
        ":root{{color-scheme:light dark;{light}}}\
         @media (prefers-color-scheme:dark){{:root{{{dark}}}}}\
         {SCREEN}{pictures}@media print{{:root{{color-scheme:light;{light}}}{PAPER}}}"
    )
}

const SCREEN: &str = "\
*{box-sizing:border-box}\
html{background:var(--paper);color:var(--ink);\
font:16px/1.45 system-ui,\"Segoe UI\",Roboto,Helvetica,Arial,sans-serif}\
body{margin:0 auto;max-width:76rem;padding:1rem}\
h1{font-size:1.7rem;line-height:1.2;margin:.2em 0;overflow-wrap:anywhere}\
h2{font-size:1.3rem;margin:2.2em 0 .5em;border-top:3px solid var(--ink);padding-top:.4em;overflow-wrap:anywhere}\
h3{font-size:1.05rem;margin:1.6em 0 .4em}\
.lead{font-size:1.1rem;margin:.2em 0 .6em}\
a{color:inherit;text-decoration-color:var(--service);text-decoration-thickness:2px;text-underline-offset:2px}\
a:focus-visible,.scrolls:focus-visible{outline:3px solid var(--service);outline-offset:2px}\
nav ul{display:flex;flex-wrap:wrap;gap:.2rem 1.1rem;list-style:none;margin:0;padding:0}\
nav a{display:inline-block;padding:.25rem 0}\
code{font-family:ui-monospace,Consolas,\"DejaVu Sans Mono\",monospace;font-size:.92em;overflow-wrap:anywhere}\
.quiet{color:var(--quiet)}\
.scrolls{overflow-x:auto}\
table{border-collapse:collapse;font-size:.9rem;line-height:1.35}\
th,td{text-align:left;vertical-align:top;padding:.3rem .9rem .3rem 0;border-bottom:1px solid var(--grid)}\
thead th{border-bottom:2px solid var(--ink);white-space:nowrap;vertical-align:bottom}\
tbody th{font-weight:600;white-space:nowrap}\
td.n,th.n{text-align:right;font-variant-numeric:tabular-nums;white-space:nowrap}\
td.w,td>code{white-space:nowrap}\
td.sum{min-width:16rem}\
.maker{display:block;color:var(--quiet);font-size:.92em}\
tr.fails th::before{content:\"\\2717 \"}\
tr.fails{outline:2px solid var(--danger);outline-offset:-2px}\
.verdict{font-weight:700}\
.cautions{border:2px solid var(--danger);padding:.2rem 1rem .6rem;margin-top:2rem}\
.cautions h2{border:0;margin-top:.3em}\
dl.figures{display:grid;grid-template-columns:repeat(auto-fill,minmax(9.5rem,1fr));gap:.6rem 1.2rem;margin:.6rem 0 1.2rem}\
dl.figures dt{color:var(--quiet);font-size:.88rem}\
dl.figures dd{margin:0;font-weight:600;overflow-wrap:anywhere}\
.pictures{display:grid;grid-template-columns:repeat(auto-fit,minmax(min(21rem,100%),1fr));gap:1.2rem;align-items:start}\
figure{margin:0;border:1px solid var(--grid)}\
figure .picture{display:block;width:100%;height:auto}\
figcaption{padding:.4rem .7rem .6rem;font-size:.88rem;color:var(--quiet)}\
.rests a{margin-right:.5rem;white-space:nowrap}\
:target{background:color-mix(in srgb,var(--marked) 25%,var(--paper))}\
.set>h2:target,section:target{background:none}";

const PAPER: &str = "\
@page{margin:14mm 12mm}\
html{font-size:9.5pt}\
body{max-width:none;padding:0}\
nav{display:none}\
a{text-decoration:none}\
.scrolls{overflow:visible}\
table{width:100%;font-size:7.6pt}\
td.sum{min-width:0}\
th,td{padding:.1rem .5rem .1rem 0}\
tbody th,.rests a,td.n,td.w,thead th{white-space:normal}\
td>code{white-space:normal}\
th,td{overflow-wrap:break-word}\
td.sum,td.any,td code{overflow-wrap:anywhere}\
thead{display:table-header-group}\
tr,figure,.cautions,dl.figures{break-inside:avoid}\
h2,h3{break-after:avoid}\
.set{break-before:page}\
.pictures{grid-template-columns:1fr 1fr;gap:4mm}\
*{-webkit-print-color-adjust:exact;print-color-adjust:exact}";
