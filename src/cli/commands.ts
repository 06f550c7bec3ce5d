// The one table of commands and options: the parser, the help and the types of the handlers are made from it,
// so that an option without a line of help does not compile.

interface OptionRow {
  readonly type: 'string' | 'boolean';
  readonly short?: string;
  readonly multiple?: true;
  /** Name of its value in the help. */
  readonly value?: string;
  readonly choices?: readonly string[];
  readonly about: string;
}

export const OPTIONS = {
  out: { type: 'string', short: 'o', value: 'PATH', about: 'where the output goes' },
  set: {
    type: 'string',
    multiple: true,
    value: 'KEY=VALUE',
    about: 'change a value of the case, by its dotted path; may be given more than once',
  },
  json: { type: 'boolean', about: 'print the summary as JSON to standard output' },
  quiet: { type: 'boolean', about: 'print errors only' },
  units: {
    type: 'string',
    value: 'kmh|mph',
    choices: ['kmh', 'mph'],
    about: 'speeds that people read, in km/h (the default) or mph; data files stay metric',
  },
  threads: {
    type: 'string',
    value: 'N',
    about: 'threads for the combinations of a matrix; as many as cores where it is left out',
  },
  junit: {
    type: 'string',
    value: 'FILE',
    about: 'also write the requirements as JUnit XML, for build servers; the name ends in .xml',
  },
  kind: {
    type: 'string',
    value: 'KIND',
    choices: ['coast-down', 'step', 'ride'],
    about: 'what the logs are of: coast-down, step or ride; left out, their columns tell',
  },
  vehicle: {
    type: 'string',
    value: 'FILE',
    about: 'vehicle file that gives what is not measured and takes what is, in a copy',
  },
  case: {
    type: 'string',
    value: 'CASE',
    about: 'case whose road and vehicle a ride is held against',
  },
  fit: {
    type: 'string',
    value: 'NAMES',
    about:
      'numbers to fit to a ride, with commas between: cda_m2, crr, mass_kg; cda_m2,crr where it is left out',
  },
  'mass-kg': { type: 'string', value: 'KG', about: 'mass of vehicle, rider and load in the logs' },
  'rotating-kg': {
    type: 'string',
    value: 'KG',
    about: 'equivalent mass of what turns with the wheels',
  },
  'air-temperature-c': { type: 'string', value: 'C', about: 'temperature of the air at the road' },
  'air-pressure-hpa': {
    type: 'string',
    value: 'HPA',
    about: 'pressure of the air at the road, not brought to sea level',
  },
  'air-density-kg-m3': {
    type: 'string',
    value: 'KG/M3',
    about: 'density of the air, in place of temperature and pressure',
  },
  png: {
    type: 'boolean',
    about: 'also write each picture as PNG, for slides and build servers',
  },
  'png-width': {
    type: 'string',
    value: 'PIXELS',
    about: 'width of those pictures, 1600 where it is left out; means --png',
  },
  add: {
    type: 'string',
    multiple: true,
    value: 'DESIGN[=NAME]',
    about:
      'put the gains of a design (settling, droop, simc, rejection, schedule, road, or best) into the case as a candidate; may be given more than once',
  },
  help: { type: 'boolean', short: 'h', about: 'print this help' },
} as const satisfies Readonly<Record<string, OptionRow>>;

export type OptionName = keyof typeof OPTIONS;

interface CommandRow {
  /**
   * Names of its operands in the help. The last one may be given more than once where it ends in three dots, and left
   * out where it stands in brackets; all others are required.
   */
  readonly operands: readonly string[];
  readonly about: string;
  /** What more there is to know: paragraphs of the command's own help. */
  readonly details: readonly string[];
  readonly options: readonly OptionName[];
  readonly example: string;
}

export const COMMANDS = {
  run: {
    operands: ['CASE'],
    about: 'replay a case: road, loops, study, report',
    details: [
      'Reads the case (YAML or JSON) and the files that it names, replays every candidate over the road, and writes report.html, summary.json, the data files and the charts into a folder: --out, or out/<case name> (for a file called case.yaml, out/<name of its folder>).',
      'The folder is changed only when the whole run succeeded, and of what was there only the files of an earlier run are replaced or removed: a file that no run wrote stays, and one in the way of the report or the summary is refused.',
      'A matrix in the case (loads, winds, directions, gears, set speeds) is replayed in every combination, side by side where there are cores; the results are the same for any number of threads.',
      'Refused for its size: a road of more than 2,000,000 knots; runs of more than 500,000,000 controller samples, or tables of more than 2,000,000 rows, over all candidates.',
      'JUnit XML has one test suite a candidate and one test case a requirement: not met is a failure, not judged an error, too close to call is skipped. Of files that are there already only an earlier one of ridgehold is written over.',
      'Exit status: 0 done; 1 done, but a requirement is not met, in the run itself or in a combination; 2 the input was refused; 3 a numerical failure; 70 a fault of the program.',
    ],
    options: ['out', 'set', 'junit', 'png', 'png-width', 'threads', 'json', 'quiet', 'units', 'help'],
    example: 'ridgehold run night-post.yaml --set hold.set_speed_kmh=70 -o out/at-70',
  },
  road: {
    operands: ['TRACK|CASE'],
    about: 'turn a track into disturbance sequences, and say what was repaired',
    details: [
      'Reads a track (.gpx, .csv, .geojson) with the default road options, or the track of a case, and writes disturbance.csv, route.geojson, road.svg (elevation, grade with its uncertainty, wind) and road.json into a folder: --out, or out/<name> (for a file called case.yaml, out/<name of its folder>).',
      'Repairs, warnings and the uncertainty of the grade are told on standard error. For a bare track, --set takes the keys of a case that concern the road: track.*, road.*, wind.*, air.*.',
    ],
    options: ['out', 'set', 'png', 'png-width', 'json', 'quiet', 'units', 'help'],
    example: 'ridgehold road ride.gpx --set road.elevation_source=gnss --set track.trim_ends_m=300',
  },
  compare: {
    operands: ['BEFORE', 'AFTER'],
    about: 'set two results side by side: inputs, figures, requirements, hills',
    details: [
      'BEFORE and AFTER are folders that ridgehold run wrote. Tells what changed in the files by SHA-256 and in the values of case and vehicle, in each figure of the candidates that both have, requirement by requirement, and hill by hill, and writes compare.html and compare.json into a folder: --out, or out/<name of BEFORE>-and-<name of AFTER>.',
      'Exit status: 0 done; 1 done, but a requirement that was met no longer is, or is no longer asked of a candidate that is still there; 2 a folder was refused; 70 a fault of the program.',
    ],
    options: ['out', 'json', 'quiet', 'units', 'help'],
    example: 'ridgehold compare out/harrow-gap out/at-70 -o out/faster-or-not',
  },
  identify: {
    operands: ['LOG...'],
    about: 'turn logs of a coast-down, a step test or a ride into numbers of the vehicle',
    details: [
      'A log is a CSV file whose header names the units: time_s and speed_kmh or speed_m_s; then elevation_m or grade_pct, headwind_m_s, distance_m where they were measured; run and direction (there or back) where a file holds several runs. throttle_pct makes it a step test, and with a place (distance_m, elevation_m, lat_deg and lon_deg) or with wheel_power_kw a ride.',
      'Coast-downs, runs both ways from high speed to below half of it, give the drag area and the rolling coefficient with their 95 % intervals; a step of the throttle gives gain, time constant and delay; a ride with its power or throttle is held against the vehicle, segment by segment, and corrects it. Logs that are too thin are refused, with what to measure.',
      'Writes the file that --out names (out/<name of the log>/vehicle.yaml where it is left out), a vehicle file that ridgehold run takes, each number with where it is from, and beside it identify.html, identify.json and the charts (charts/identify-*.svg); of a step test PI candidates for a case (candidates.yaml). Only a file that ridgehold wrote, and nobody changed since, is written over.',
      'Exit status: 0 done; 2 the input was refused; 70 a fault of the program.',
    ],
    options: [
      'out',
      'kind',
      'vehicle',
      'case',
      'fit',
      'mass-kg',
      'rotating-kg',
      'air-temperature-c',
      'air-pressure-hpa',
      'air-density-kg-m3',
      'png',
      'png-width',
      'json',
      'quiet',
      'units',
      'help',
    ],
    example: 'ridgehold identify there.csv back.csv --vehicle mine.yaml -o measured/mine.yaml',
  },
  tune: {
    operands: ['CASE'],
    about: 'find gains: operating points, margins, designs, and the best on the road',
    details: [
      'Finds where the loop of the case will run (the places of the route with each load, and a grid), tells the margins of every candidate there, and proposes gains by six ways, each the tightest whose greatest sensitivity keeps tune.max_sensitivity at every operating point: settling and droop (a pair of poles), simc (from the delay), rejection (the greatest integral gain), schedule (the same over gears and speeds), and road: those that make tune.cost least over replays of the road.',
      'Writes tune.html, margins.csv, proposals.csv, tune.json and the charts into a folder: --out, or out/<case name>-tune. Without tune in the case the defaults stand; ridgehold schema case tells them.',
      'The requirements of the case are judged for every candidate and proposal as ridgehold run judges them. Of the proposals that one is to be taken which misses the fewest, and of those the one that costs least; what it misses is said with it, and does not change the exit status.',
      'With --add a proposal goes into the case file as a candidate, under its own name (tuned-road) or another; no other byte of the file changes, a name that is there already is refused, and ridgehold run on that case finds the figures and verdicts that were told. Beside --add, --set may only change what stands under tune.',
      'Exit status: 0 done; 1 done, but a candidate of the case exceeds the bound at an operating point, or nothing could be proposed; 2 the input was refused; 3 a numerical failure; 70 a fault of the program.',
    ],
    options: ['out', 'set', 'add', 'png', 'png-width', 'json', 'quiet', 'units', 'help'],
    example: 'ridgehold tune night-post.yaml --set tune.max_sensitivity=1.5 --add road=pi-night',
  },
  workbench: {
    operands: ['[CASE]'],
    about: 'write the page in which values are changed and the whole route answers',
    details: [
      'Writes one HTML file that carries the case and the files that it names: --out, or out/<case name>/workbench.html; without a case one that begins with a demo, out/workbench.html. It needs no server and asks for nothing: open it in a browser, send it to a colleague.',
      'What is changed in the page stays in the page. It saves the case as the same YAML with its comments, and the report and the data files that ridgehold run writes for it.',
    ],
    options: ['out', 'quiet', 'help'],
    example: 'ridgehold workbench night-post.yaml -o night-post.html',
  },
  new: {
    operands: ['DIR'],
    about: 'write a commented starter case into a new folder',
    details: ['The folder is made if it does not exist; one that holds anything is refused.'],
    options: ['quiet', 'help'],
    example: 'ridgehold new my-road && ridgehold run my-road/case.yaml',
  },
  schema: {
    operands: ['case|vehicle'],
    about: 'print the JSON Schema of a case or vehicle file',
    details: [
      'To standard output, or into the file that --out names. Editors check and complete YAML by it.',
    ],
    options: ['out', 'help'],
    example: 'ridgehold schema case -o case.schema.json',
  },
} as const satisfies Readonly<Record<string, CommandRow>>;

export type CommandName = keyof typeof COMMANDS;

export const isCommand = (name: string): name is CommandName => Object.hasOwn(COMMANDS, name);

type ValueOf<Name extends OptionName> = (typeof OPTIONS)[Name] extends { readonly type: 'boolean' }
  ? boolean
  : (typeof OPTIONS)[Name] extends { readonly multiple: true }
    ? readonly string[]
    : (typeof OPTIONS)[Name] extends { readonly choices: readonly (infer Choice)[] }
      ? Choice | undefined
      : string | undefined;

/** The values of the options that a command has, and no others. */
export type Values<Name extends CommandName> = {
  readonly [Option in (typeof COMMANDS)[Name]['options'][number]]: ValueOf<Option>;
};

type Texts<Operands extends readonly unknown[]> = Operands extends readonly [`${string}...`]
  ? readonly [string, ...string[]]
  : Operands extends readonly [`[${string}]`]
    ? readonly [string?]
    : { readonly [Index in keyof Operands]: string };

/** A command line that was understood. */
export interface Invocation<Name extends CommandName> {
  readonly command: Name;
  readonly operands: Texts<(typeof COMMANDS)[Name]['operands']>;
  readonly values: Values<Name>;
}
