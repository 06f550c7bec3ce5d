import { paintVariables } from './paint.ts';

/**
 * The one style sheet of the page. A memo: one column of text and evidence, contents beside it where there is room.
 * System fonts, so that nothing is fetched. Print: white, no card cut in two, wide charts.
 */
export const STYLE = `
:root{color-scheme:light dark;--edge:#1a1d2159;--good:#00614a;--bad:#a02c00;--open:#5b4a00;--accent:#005a8c;${paintVariables('light')}}
@media (prefers-color-scheme:dark){:root{--edge:#e9ecef66;--good:#4fd1a8;--bad:#ff9d6b;--open:#f0e442;--accent:#7cc4ee;${paintVariables('dark')}}}
*{box-sizing:border-box}
html{scroll-padding-top:1rem}
body{margin:0;background:var(--page);color:var(--ink);font:16px/1.5 system-ui,'Segoe UI','Helvetica Neue',Arial,'DejaVu Sans',sans-serif}
a{color:var(--accent)}
a:focus-visible,summary:focus-visible,.scroll:focus-visible{outline:3px solid var(--accent);outline-offset:2px}
.skip{position:absolute;left:-999rem;background:var(--page);padding:.5rem 1rem}
.skip:focus{left:0;top:0;z-index:2}
.sheet{max-width:1240px;margin:0 auto;padding:0 1.25rem;display:grid;grid-template-columns:11.5rem minmax(0,1fr);column-gap:2.5rem}
header{grid-column:1/-1;border-bottom:3px solid var(--ink);padding:1.6rem 0 .9rem;margin-bottom:1.4rem}
header h1{font-size:1.75rem;line-height:1.2;margin:0 0 .5rem;letter-spacing:-.01em;overflow-wrap:anywhere}
.memo{display:flex;flex-wrap:wrap;gap:.2rem 2rem;margin:0;max-width:none;font-size:.88rem}
.memo div{display:flex;gap:.5rem}
.memo dt{color:var(--muted)}
.memo dd{margin:0;overflow-wrap:anywhere}
nav{font-size:.88rem}
nav ol{list-style:none;margin:0;padding:0;position:sticky;top:1rem}
nav a{display:flex;gap:.5rem;padding:.22rem 0;color:var(--ink);text-decoration:none}
nav a:hover{text-decoration:underline}
nav .n{color:var(--muted);min-width:1.3rem;text-align:right;font-variant-numeric:tabular-nums}
section{margin:0 0 3rem}
h2{font-size:1.25rem;margin:0 0 .7rem;padding-bottom:.25rem;border-bottom:1px solid var(--grid);display:flex;gap:.6rem}
h2 .n{color:var(--muted);font-weight:400}
h3{font-size:1rem;margin:1.6rem 0 .4rem}
p,ul,dl{max-width:46rem;margin:.5rem 0}
.answer{border-left:6px solid var(--muted);padding:.2rem 0 .2rem 1rem;margin:0 0 1.3rem}
.answer.good{border-color:var(--good)}.answer.bad{border-color:var(--bad)}.answer.open{border-color:var(--open)}
.standing{font-weight:700;margin:0}
.good .standing{color:var(--good)}.bad .standing{color:var(--bad)}.open .standing{color:var(--open)}
.of{font-weight:400;color:var(--muted);font-size:.9em}
.sentence{font-size:1.22rem;line-height:1.42;margin:.2rem 0 0;max-width:52rem}
.note,.small,figcaption,.keyline{font-size:.86rem}
.small,figcaption{color:var(--muted)}
.caution{border:1px solid var(--warn);padding:.5rem .8rem;font-size:.9rem}
figure{margin:.8rem 0}
figure svg{display:block;width:100%;height:auto}
figcaption{margin-top:.3rem;max-width:52rem}
.narrow{display:none}
.pair{display:grid;grid-template-columns:repeat(auto-fit,minmax(min(100%,24rem),1fr));gap:0 2rem}
.pair>*{min-width:0}
.keys{list-style:none;padding:0;display:flex;flex-wrap:wrap;gap:.25rem 1.2rem;font-size:.86rem;max-width:none}
.keys li{display:inline-flex;align-items:center;gap:.4rem}
.keyline{margin-bottom:0}
svg.key{display:inline-block;flex:none;vertical-align:middle}
.masked{display:inline-block;width:1.4rem;height:.8rem;background:var(--grid)}
svg.bar{display:block;margin-top:.15rem}
.who{white-space:nowrap}
.scroll{overflow-x:auto;margin:.7rem 0 1rem;max-width:100%;background:linear-gradient(90deg,var(--page) 40%,transparent) left/2.5rem 100% no-repeat local,linear-gradient(270deg,var(--page) 40%,transparent) right/2.5rem 100% no-repeat local,linear-gradient(90deg,var(--edge),transparent) left/1rem 100% no-repeat scroll,linear-gradient(270deg,var(--edge),transparent) right/1rem 100% no-repeat scroll}
table{border-collapse:collapse;font-size:.86rem;font-variant-numeric:tabular-nums}
th,td{text-align:left;vertical-align:top;padding:.32rem .9rem .32rem 0;border-bottom:1px solid var(--grid)}
thead th{border-bottom:2px solid var(--muted);vertical-align:bottom;line-height:1.25}
tbody th{font-weight:600}
.dense{font-size:.8rem}.dense th,.dense td{padding-right:.6rem}.dense td.num .small:not(.wrap){white-space:normal}.name{display:inline-block;max-width:6.5rem;overflow-wrap:break-word}
tr.group th{padding-top:.8rem;border-bottom-color:var(--muted);color:var(--muted);font-weight:400}tr.group span{position:sticky;left:0}
.num{text-align:right}
td.num,tbody th{white-space:nowrap}
td.num .small:not(.wrap){white-space:nowrap}
table .small{font-size:.94em}
.wrap{white-space:normal;display:inline-block;min-width:6.5rem;max-width:22rem}
.wrap.what{min-width:13rem}.wrap.reason{max-width:9rem}
.verdict{font-weight:700;white-space:nowrap}
.verdict.good{color:var(--good)}.verdict.bad{color:var(--bad)}.verdict.open{color:var(--open)}
.matrix th,.matrix td{padding:.3rem .28rem;vertical-align:top}.matrix thead th{border-bottom:1px solid var(--grid);border-left:1px solid var(--grid);text-align:center}.matrix thead th.head{border-left:0;text-align:right;font-weight:400;color:var(--muted)}.matrix thead tr:last-child th{border-bottom:2px solid var(--muted)}.matrix tbody th{min-width:8.5rem;white-space:normal}.matrix tbody th .small{font-weight:400}.matrix td{border-left:1px solid var(--grid);text-align:center;line-height:1.3}.matrix td .verdict{white-space:normal}.matrix td .small{color:var(--ink)}.matrix td a{color:inherit}
.wash.good{background:color-mix(in srgb,var(--good) 9%,var(--page))}.wash.bad{background:color-mix(in srgb,var(--bad) 22%,var(--page))}.wash.open{background:repeating-linear-gradient(45deg,color-mix(in srgb,var(--open) 22%,var(--page)) 0 3px,color-mix(in srgb,var(--open) 8%,var(--page)) 3px 9px)}
.matrix-line{max-width:52rem}
.card h4{margin:0 0 .2rem;font-size:.92rem}.card:target{border-color:var(--accent)}
.cards{display:grid;grid-template-columns:repeat(auto-fill,minmax(min(100%,25rem),1fr));gap:1.2rem;margin:1rem 0}
.card{border:1px solid var(--grid);border-top:4px solid var(--muted);padding:.7rem .9rem;min-width:0}
.card h3{margin:0 0 .2rem}
.card p,.card ul{font-size:.86rem}
.card svg:not(.key){display:block;width:100%;height:auto;max-width:30rem}
.card table{font-size:.78rem}
.card th,.card td{padding-right:.55rem}
.card .why{padding-left:1.1rem;margin-bottom:0}
.hold{color:var(--muted)}
.flag{color:var(--warn);font-weight:700}
.equations dt{font-family:Georgia,'Times New Roman','DejaVu Serif',serif;font-size:1.05rem;margin-top:.6rem;overflow-wrap:anywhere}
.equations dd{margin:0 0 0 1.2rem;font-size:.9rem;color:var(--muted)}
code{font-family:ui-monospace,'SF Mono',Consolas,'DejaVu Sans Mono',monospace;font-size:.92em;overflow-wrap:anywhere}
th code,td code{white-space:nowrap}
td .hash{font-size:.8em;white-space:normal}
summary{cursor:pointer;padding:.4rem 0;font-weight:600}
footer{grid-column:1/-1;border-top:1px solid var(--grid);padding:1rem 0 2rem;font-size:.86rem;color:var(--muted)}
@media (max-width:1000px){.sheet{grid-template-columns:minmax(0,1fr)}nav ol{position:static;display:flex;flex-wrap:wrap;gap:0 1.1rem;margin-bottom:1.5rem}nav .n{min-width:0}}
@media (max-width:640px){body{font-size:15px}.sheet{padding:0 .9rem}.wide{display:none}.narrow{display:block}header h1{font-size:1.35rem}.sentence{font-size:1.08rem}.answer{padding-left:.7rem}.wrap,.wrap.what{min-width:9rem}tbody th{position:sticky;left:0;background:var(--page)}
.asked table,.asked tbody{display:block}.asked thead{display:none}.asked tr{display:flex;flex-wrap:wrap;gap:.05rem .9rem;padding:.45rem 0;border-bottom:1px solid var(--grid)}.asked th,.asked td{border:0;padding:0;text-align:left}.asked td.num{white-space:normal;max-width:100%}.asked .reason{display:inline;min-width:0}.asked td:nth-child(4){flex-basis:100%}.asked .wrap{max-width:none}.asked td:nth-child(n+5)::before{color:var(--muted)}.asked td:nth-child(5)::before{content:'measured '}.asked td:nth-child(6)::before{content:'limit '}.asked td:nth-child(7)::before{content:'margin '}.asked td:nth-child(8)::before{content:'worst at '}}
@media print{
@page{margin:14mm}
:root{color-scheme:light;--good:#00614a;--bad:#a02c00;--open:#5b4a00;--accent:#005a8c;${paintVariables('light')}}
body{background:#fff;font-size:10pt}
.sheet{display:block;max-width:none;padding:0}
nav,.skip,details{display:none}
.wide{display:block}.narrow{display:none}
.scroll{overflow:visible;background:none}
table{font-size:7.6pt;line-height:1.32}
svg.bar{margin-top:0}
th,td{padding:.2rem .5rem .2rem 0}
section{margin-bottom:1.2rem}
h2,h3,.keyline{break-after:avoid}
figure,.card,tr,.answer,.caution{break-inside:avoid}
thead{display:table-header-group}
.cards{display:block}
.card{padding:1.5mm 3mm;margin-bottom:3.5mm;display:grid;grid-template-columns:5.8cm minmax(0,1fr);column-gap:5mm}
.card h3{font-size:10.5pt}
.card h3,.card .facts,.card .why{grid-column:1/-1;margin:.2rem 0}
.card .scroll{margin:0}
.card th,.card td{padding-top:.14rem;padding-bottom:.14rem}
.dense{font-size:7pt}
.dense th,.dense td{padding-right:.4rem}
.dense .who{white-space:normal}
section>p:has(+figure),section>p:has(+.scroll),section>p:has(+.keys),section>p:has(+p+.keys){break-after:avoid}
#force svg{max-height:58mm}
#spread .pair{grid-template-columns:1fr 1fr;gap:0 6mm}
#force:has(tbody tr:nth-child(2)) svg{max-height:96mm}
#lanes svg:not(.key){max-height:222mm}
#rider .cards{display:grid;grid-template-columns:1fr 1fr;gap:3.5mm}
#rider .card{display:block;margin:0}
#rider .keys{break-after:auto}
.card p,.card ul{font-size:7.6pt;line-height:1.35}
.card table{font-size:7pt}
.keys,.keyline,.facts{break-after:avoid}
.keys{break-inside:avoid}
.sentence{font-size:12.5pt}
.wrap.what{min-width:9rem}
p{break-inside:avoid;margin:.35rem 0}
.note,figcaption,.keys{font-size:8.4pt}
li{orphans:3;widows:3}
.hash{font-size:6.4pt}
a{color:inherit;text-decoration:none}
*{print-color-adjust:exact;-webkit-print-color-adjust:exact}
}
`;
