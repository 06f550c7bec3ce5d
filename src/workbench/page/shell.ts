import { sha256 } from '@noble/hashes/sha2.js';
import { utf8ToBytes } from '@noble/hashes/utils.js';
import { base64 } from '../../report/base64.ts';
import { html } from '../../report/html.ts';
import { STYLE } from '../../report/style.ts';
import { type CarriedCase, jsonInPage } from '../../run/carried-case.ts';
import { BENCH_STYLE } from './style.ts';

/** A case to begin with. */
export interface Demo {
  /** What it is, for a button. */
  readonly words: string;
  readonly study: CarriedCase;
}

export interface ShellParts {
  /** Code of the page and of its threads, without imports. */
  readonly code: string;
  readonly demos: readonly Demo[];
}

const LEAD =
  'Replays a planned road against speed-hold designs for motorcycles, scooters and other light vehicles: change a gain, and the whole route answers.';

/**
 * The workbench as one file that needs nothing else and asks for nothing, opened from a disk too. A content security
 * policy lets run what is in it and nothing more. It begins with nothing: see `withStart`.
 */
export function workbenchPage({ code, demos }: ShellParts): string {
  const script = inElement(code);
  const style = STYLE + BENCH_STYLE;
  const hash = (text: string): string => `'sha256-${base64(sha256(utf8ToBytes(text)))}'`;
  const policy = `default-src 'none'; script-src ${hash(script)}; worker-src blob:; style-src ${hash(style)}; img-src data:; base-uri 'none'; form-action 'none'`;
  const head = html`<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${policy}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="referrer" content="no-referrer">
<title>Ridgehold workbench</title>
`;
  const body = html`<a class="skip" href="#values">Skip to the values</a>
<a class="skip" href="#sections">Skip to the answer</a>
<div class="bench" id="bench" data-empty>
<header>
<p class="product">Ridgehold workbench</p>
<h1 id="title">Change a gain, and the whole route answers</h1>
<dl class="memo" id="memo"></dl>
<div class="tools" role="group" aria-label="Bring in, take back, take out">
<label class="pick">Open files<input id="open" type="file" multiple accept=".yaml,.yml,.json,.gpx,.csv,.geojson"></label>
<button type="button" class="of-study" id="undo" aria-keyshortcuts="Control+Z">Undo</button>
<button type="button" class="of-study" id="redo" aria-keyshortcuts="Control+Shift+Z Control+Y">Redo</button>
<span class="gap of-study"></span>
<button type="button" class="of-study" id="save-case">Save case</button>
<button type="button" class="of-study" id="save-vehicle">Save vehicle</button>
<button type="button" class="of-study" id="take-report">Report</button>
<button type="button" class="of-study" id="take-data">Data files</button>
<button type="button" class="of-study" id="take-charts">Charts</button>
<label class="of-study">Speeds in <select id="units"><option value="kmh">km/h</option><option value="mph">mph</option></select></label>
</div>
</header>
<main class="welcome">
<p class="sentence">${LEAD}</p>
<p>Drop a case with its track and vehicle here, or a GPX, CSV or GeoJSON track alone. Nothing leaves this page. Or begin with a demo; all of it is invented:</p>
<ul id="demos">${demos.map(({ words }, i) => html`<li><button type="button" data-demo="${i}">${words}</button></li>`)}</ul>
<p class="caution"><strong>A simulation is no approval to ride.</strong> Local rules, type approval and qualified people come first.</p>
<ul class="fault-list" id="welcome-faults"></ul>
<noscript><p class="fault">This page works things out by itself and needs scripts allowed to do so.</p></noscript>
</main>
<aside id="values" aria-labelledby="values-h" tabindex="-1">
<h2 id="values-h">Values</h2>
<div id="fields"></div>
<details class="source"><summary>The case as text</summary><label for="source">Every key can be changed here</label>
<textarea id="source" spellcheck="false" autocapitalize="off" autocomplete="off" aria-describedby="source-fault"></textarea>
<button type="button" id="apply">Take over</button><p class="fault" id="source-fault" hidden></p></details>
</aside>
<div class="results">
<div id="live" role="region" aria-label="State of the work">
<div id="state"><span id="words"></span><progress id="progress" max="1" aria-label="Share of the work that is done" hidden></progress><button type="button" id="stop" hidden>Stop</button><button type="button" id="again" hidden>Work it out</button><button type="button" id="matrix" hidden></button><a class="to-answer" href="#answer">To the answer</a></div>
<p id="quick" hidden></p>
<ul id="faults"></ul>
<ul class="taken" id="taken" aria-label="Files to save" hidden></ul>
</div>
<p class="unseen" role="status" id="spoken"></p>
<nav aria-label="Contents"><ol id="contents"></ol></nav>
<main id="sections" tabindex="-1"></main>
</div>
<footer>A simulation is no approval to ride. Nothing leaves this page.</footer>
</div>
`;
  // Constants of this program, and JSON that can stand in an element: their texts must stand unescaped.
  return `<!doctype html>
<html lang="en">
<head>
${head}<style>${style}</style>
</head>
<body>
${body}<script type="application/json" id="start">null</script>
<script type="application/json" id="demo-studies">${jsonInPage(demos.map(({ study }) => study))}</script>
<script>${script}</script>
</body>
</html>
`;
}

/** Code that can stand in a script element: in strings and patterns of it, `<\\/` and `<\\!` are `</` and `<!`. */
const inElement = (code: string): string =>
  code.replace(/<\/(?=script)/gi, '<\\/').replaceAll('<!--', '<\\!--');

export { carryCase } from '../../run/carried-case.ts';
