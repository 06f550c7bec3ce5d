/** Decimals of a figure, by the unit that its name ends in. The longest ending counts. */
const DECIMALS: Readonly<Record<string, number>> = {
  pct_per_km: 3,
  pct: 3,
  kmh: 4,
  m_s: 4,
  m_s2: 4,
  m_s3: 4,
  m_s_per_km: 4,
  per_km: 3,
  pct_per_s: 3,
  kmh_s: 3,
  kmh_s2: 2,
  kmh2_s: 3,
  s: 3,
  m: 2,
  km: 4,
  n: 2,
  w: 1,
  kw: 4,
  wh: 3,
  wh_per_km: 4,
  l: 4,
  l_per_100km: 4,
  kg: 3,
  deg: 3,
};

/** Decimals with which a figure is written in summary.json: by its unit, four where it has none. */
export function decimalsOf(name: string): number {
  const parts = name.split('_');
  for (let i = 1; i < parts.length; i++) {
    const decimals = DECIMALS[parts.slice(i).join('_')];
    if (decimals !== undefined) return decimals;
  }
  return 4;
}
