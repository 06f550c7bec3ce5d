/**
 * Colours of the charts. Candidates and kinds of energy use the palette of Okabe and Ito (2008, "Color Universal
 * Design"), told apart by the colour-blind; each has a second cue beside it (dash, hatch, label).
 * In the page a colour is a variable, so that light and dark follow the reader's choice; a standalone file has the
 * colours themselves.
 */
export interface Paint {
  readonly ink: string;
  readonly muted: string;
  readonly grid: string;
  readonly page: string;
  readonly band: string;
  readonly ground: string;
  readonly warn: string;
  /** Logged rides; their marks tell one from another. */
  readonly ride: string;
  /** Candidates: 0 is the locked throttle. */
  readonly series: readonly string[];
  /** Demand on the drive, from little to all that there is. */
  readonly demand: readonly string[];
  /** Signed error, from far too slow over right to far too fast. */
  readonly diverging: readonly string[];
  /** Where energy went, in the order of the account. */
  readonly energy: readonly string[];
}

interface Shade {
  readonly light: string;
  readonly dark: string;
}
const shade = (light: string, dark: string): Shade => ({ light, dark });

const SHADES = {
  ink: shade('#1a1d21', '#e9ecef'),
  muted: shade('#565d65', '#a9b1ba'),
  grid: shade('#dfe3e7', '#30363d'),
  page: shade('#ffffff', '#14171a'),
  band: shade('#e3edf3', '#22323c'),
  ground: shade('#f1f3f4', '#1d2226'),
  warn: shade('#b34700', '#f0a35e'),
  ride: shade('#5b3b9e', '#c3b1f5'),
} as const;

const SERIES = [
  shade('#3b4046', '#d5dade'),
  shade('#0072b2', '#56b4e9'),
  shade('#d55e00', '#e69f00'),
  shade('#009e73', '#2fc49a'),
  shade('#b5568c', '#e59cc4'),
  shade('#8a6d00', '#f0e442'),
  shade('#2c8fc9', '#8fcdf2'),
];
const DEMAND = [
  shade('#e8eff3', '#233038'),
  shade('#bcd3e0', '#35536a'),
  shade('#86b1cc', '#4a7ea3'),
  shade('#e69f00', '#c98a00'),
];
// Blue for too slow, orange for too fast: equal steps in lightness on both sides, so the sign needs the second cue.
const DIVERGING = [
  shade('#004f7c', '#9ad4f5'),
  shade('#2f7fb5', '#5aa5d1'),
  shade('#a9cfe4', '#2f5c78'),
  shade('#c9d0d6', '#444c54'),
  shade('#f6cf8a', '#7a5a1c'),
  shade('#c06f00', '#d08a2c'),
  shade('#7d3a00', '#ffd08a'),
];
const ENERGY = [
  shade('#0072b2', '#56b4e9'),
  shade('#56b4e9', '#2f7fb0'),
  shade('#009e73', '#2fc49a'),
  shade('#d55e00', '#e69f00'),
  shade('#7a8087', '#9aa2ab'),
  shade('#b5568c', '#e59cc4'),
  shade('#8a6d00', '#f0e442'),
];

const LISTS = { series: SERIES, demand: DEMAND, diverging: DIVERGING, energy: ENERGY } as const;

/** How each candidate's line is drawn, beside its colour. */
export const DASHES = ['2 3', '', '9 3', '9 3 2 3', '5 2', '13 4', '2 2 7 2'] as const;

function paintFrom(colour: (name: string, shade: Shade) => string): Paint {
  const list = (name: keyof typeof LISTS) => LISTS[name].map((s, i) => colour(`${name}-${i}`, s));
  const one = (name: keyof typeof SHADES) => colour(name, SHADES[name]);
  return {
    ink: one('ink'),
    muted: one('muted'),
    grid: one('grid'),
    page: one('page'),
    band: one('band'),
    ground: one('ground'),
    warn: one('warn'),
    ride: one('ride'),
    series: list('series'),
    demand: list('demand'),
    diverging: list('diverging'),
    energy: list('energy'),
  };
}

/** For charts inside the page. */
export const PAGE_PAINT: Paint = paintFrom((name) => `var(--${name})`);
/** For charts that stand alone. */
export const FILE_PAINT: Paint = paintFrom((_name, s) => s.light);

/** The variables that PAGE_PAINT speaks of, as declarations. */
export function paintVariables(mode: 'light' | 'dark'): string {
  const named = [
    ...Object.entries(SHADES),
    ...Object.entries(LISTS).flatMap(([name, list]) => list.map((s, i) => [`${name}-${i}`, s] as const)),
  ];
  return named.map(([name, s]) => `--${name}:${s[mode]}`).join(';');
}
