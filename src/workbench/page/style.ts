/** What the page has beside a report: the values at its side, the bar above its sections. A memo still. */
export const BENCH_STYLE = `
.bench{max-width:1560px;margin:0 auto;padding:0 1.25rem;display:grid;grid-template-columns:21rem minmax(0,1fr);column-gap:2.25rem}
.bench header{padding:1rem 0 .7rem;margin-bottom:0}
.bench header h1{margin-bottom:.2rem}
.bench .product{margin:0 0 .3rem;font-size:.86rem;color:var(--muted);max-width:none}
.tools{display:flex;flex-wrap:wrap;gap:.4rem .5rem;align-items:center;margin-top:.7rem;font-size:.88rem}
.tools .gap{flex:0 0 1rem}
button,.pick,select,input[type=text],textarea{font:inherit;color:inherit;background:var(--page);border:1px solid var(--muted);border-radius:0;padding:.25rem .6rem}
button,.pick,select{cursor:pointer}
button:hover:not(:disabled),.pick:hover{background:var(--ground)}
button:disabled{color:var(--muted);border-style:dashed;cursor:default}
button:focus-visible,select:focus-visible,input:focus-visible,textarea:focus-visible,.pick:focus-within{outline:3px solid var(--accent);outline-offset:1px}
.pick{display:inline-block;position:relative}
.pick input{position:absolute;inset:0;opacity:0;cursor:pointer;width:100%;font-size:0}
.unseen{position:absolute;width:1px;height:1px;overflow:hidden;clip-path:inset(50%);white-space:nowrap}
#values{align-self:start;position:sticky;top:0;max-height:100vh;overflow-y:auto;padding:1rem .6rem 2rem .2rem;font-size:.86rem}
#values h2{font-size:1.05rem}
#values details{border-bottom:1px solid var(--grid)}
#values summary{padding:.45rem 0}
.field{margin:0 0 .7rem;padding-left:.9rem}
.field label{display:block;line-height:1.3}
.field code{color:var(--muted)}
.entry{display:grid;grid-template-columns:5.6rem 5.4rem minmax(0,1fr);gap:.2rem .5rem;align-items:center;margin-top:.15rem}
.entry input[type=text]{width:100%;text-align:right;font-variant-numeric:tabular-nums;padding:.2rem .4rem}
.entry input[type=range]{width:100%;min-width:0;accent-color:var(--accent);margin:0}
.entry .unit{color:var(--muted);line-height:1.15}
.entry .back{grid-column:1/-1;justify-self:start;border:0;padding:0;color:var(--accent);text-decoration:underline;background:none}
.entry input[aria-invalid=true]{border:2px solid var(--bad)}
.fault{color:var(--bad);font-weight:600;margin:.2rem 0 0}
.fault::before{content:'\\2717\\a0'}
#live{position:sticky;top:0;z-index:1;background:var(--page);padding:.9rem 0 .6rem;border-bottom:1px solid var(--grid);margin-bottom:1.2rem}
#live p{margin:.1rem 0;max-width:none}
#state{font-size:.86rem;color:var(--muted);display:flex;flex-wrap:wrap;gap:.3rem .9rem;align-items:center;min-height:2.1rem}
#state progress{width:10rem;accent-color:var(--accent)}
#state button{padding:.1rem .6rem}
#quick{font-size:1.05rem;line-height:1.4}
#live ul{margin:.3rem 0;padding-left:1.1rem}
.results nav ol{position:static;display:flex;flex-wrap:wrap;gap:0 1.1rem;margin-bottom:1.2rem}
.results nav .n{min-width:0}
.results section{scroll-margin-top:9rem}
section[data-older]>h2::after{content:'of the values before';font-size:.8rem;font-weight:400;color:var(--warn);align-self:center;margin-left:auto;white-space:nowrap}
.source textarea{width:100%;min-height:18rem;font:12.5px/1.45 ui-monospace,'SF Mono',Consolas,'DejaVu Sans Mono',monospace;resize:vertical}
.welcome{grid-column:1/-1;max-width:46rem;padding:1.5rem 0 3rem}
.welcome .sentence{margin-bottom:1rem}
.welcome ul{list-style:none;padding:0}
.welcome li{margin:.5rem 0}
.taken{font-size:.86rem;columns:16rem;padding-left:1.1rem}
.bench[data-empty] #values,.bench[data-empty] .results,.bench[data-empty] .of-study{display:none}
.bench:not([data-empty]) .welcome{display:none}
body.dropping::after{content:'Drop to bring it in';position:fixed;inset:.6rem;border:4px dashed var(--accent);display:grid;place-items:center;background:color-mix(in srgb,var(--page) 80%,transparent);font-size:1.5rem;z-index:3;pointer-events:none}
[hidden]{display:none!important}
@media (min-width:2200px){.bench{max-width:2100px;grid-template-columns:26rem minmax(0,1fr)}}
@media (max-width:1000px){.bench{grid-template-columns:minmax(0,1fr)}#values{position:static;max-height:none}#quick{font-size:.95rem}}
.to-answer{display:none}
@media (max-width:1000px){html{scroll-padding-bottom:10rem}#values{padding:.6rem .3rem}.bench:not([data-empty]){padding-bottom:9rem}#live{position:fixed;left:0;right:0;bottom:0;top:auto;margin:0;padding:.4rem .9rem;border:0;border-top:2px solid var(--ink);max-height:45vh;overflow-y:auto}#state{min-height:0}.to-answer{display:inline}.results section{scroll-margin-top:1rem}}
@media (max-width:640px){.bench{padding:0 .9rem}.entry{grid-template-columns:5.2rem 4.6rem minmax(0,1fr)}}
@media (prefers-reduced-motion:no-preference){html{scroll-behavior:smooth}}
@media print{.bench{display:block;max-width:none;padding:0}#values,#live,.tools,.results nav,.welcome,.product{display:none}}
`;
