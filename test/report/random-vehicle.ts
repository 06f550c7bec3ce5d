/** What draws the parts of a random vehicle. */
export interface Draw {
  readonly between: (least: number, most: number, digits?: number) => number;
  readonly oneOf: <T>(...values: readonly T[]) => T;
  readonly maybe: <T extends object>(part: T, share?: number) => T | Record<string, never>;
}

/** An engine, a belt or an electric drive with its battery, all keys in range; gears reach from a walk to beyond 130 km/h. */
export function randomDrive(draw: Draw): object {
  return draw.oneOf(engine, variator, electric)(draw);
}

const combustion = ({ between, oneOf, maybe }: Draw): object => {
  const peak = between(7, 14);
  return {
    torque: oneOf<object>(
      { full_load: [1500, 4000, 7000, 10_000].map((rpm) => ({ rpm, nm: peak * between(0.6, 1) })) },
      { peak_nm: peak, peak_rpm: 6000, falloff: between(0.2, 0.6) },
    ),
    closed_throttle_drag: [1500, 10_000].map((rpm) => ({ rpm, nm: between(0.2, 2.5) })),
    idle_rpm: 1500,
    rev_limit_rpm: between(9000, 10_000, 0),
    engine_inertia_kg_m2: between(0, 0.02, 4),
    driveline_efficiency_pct: between(75, 100),
    ...maybe({
      fuel_cut: {
        above_rpm: 2500,
        blend_rpm: 300,
        below_throttle_pct: between(0.5, 4),
        extra_drag_nm: between(0, 1),
      },
    }),
    ...maybe({ altitude_derate: 'naturally_aspirated' }),
    ...maybe({
      fuel: {
        willans: { friction_nm: between(0, 2), slope_pct: between(25, 45) },
        ...maybe({ tank_l: between(3, 20) }),
      },
    }),
    lag_s: between(0, 0.4),
    wheel_radius_m: 0.3,
  };
};

const engine = (draw: Draw): object => {
  const { between, oneOf } = draw;
  return {
    kind: 'engine',
    ...combustion(draw),
    gear_ratios: [3, 2, 1.5, 1.2, 1],
    primary_ratio: 3,
    final_ratio: between(2.4, 3),
    gear: oneOf(3, 4, 5),
    gearbox: oneOf<object>(
      { kind: 'fixed' },
      { kind: 'clutch', open_s: between(0, 1), resume_s: between(0, 3) },
      {
        kind: 'automatic',
        shift_lines: [
          { throttle_pct: 0, up_rpm: 5000, down_rpm: 2500 },
          { throttle_pct: 100, up_rpm: 8500, down_rpm: 4800 },
        ],
        gap_s: between(0, 0.4),
        dwell_s: between(0.5, 3),
      },
    ),
  };
};

const variator = (draw: Draw): object => {
  const { between } = draw;
  return {
    kind: 'variator',
    ...combustion(draw),
    belt: {
      high_ratio: between(0.6, 0.9),
      low_ratio: between(2, 3),
      final_ratio: between(6, 8),
      line: [
        { throttle_pct: 0, rpm: between(3800, 4500, 0) },
        { throttle_pct: 100, rpm: between(6000, 8000, 0) },
      ],
      lag_s: between(0, 0.8),
    },
    clutch: { begins_rpm: 2500, locked_rpm: between(3000, 3700, 0) },
  };
};

const electric = ({ between, maybe }: Draw): object => ({
  kind: 'electric',
  peak_force_n: between(150, 900),
  peak_power_kw: between(4, 20),
  regeneration_force_n: between(0, 300),
  efficiency_pct: { drive: between(60, 98), regeneration: between(0, 90) },
  battery: {
    capacity_wh: between(20, 4000),
    charge_pct: between(20, 100),
    reserve_pct: between(0, 15),
    ...maybe({
      full_fade: [
        { charge_pct: 80, accepts_pct: 100 },
        { charge_pct: 100, accepts_pct: between(0, 50) },
      ],
    }),
  },
  ...maybe({ heating: { continuous_power_kw: between(1, 4), peak_power_s: between(5, 300) } }),
});

/** Throttle body, wheel sensor and grip. */
export function randomFittings({ between, oneOf, maybe }: Draw): object {
  return {
    ...maybe({
      actuator: {
        lag_s: between(0, 0.4),
        ...maybe({ rate_limit_pct_per_s: between(5, 800) }),
        ...maybe({ dead_time_s: between(0, 0.1) }),
        ...maybe({ resolution_pct: between(0.05, 2) }),
        ...maybe({ travel_pct: [between(0, 3), between(90, 100)] }),
        ...maybe({ slack_pct: between(0.2, 6) }),
      },
    }),
    ...maybe({
      speed_sensor: {
        filter_s: between(0, 0.3),
        delay_s: between(0, 0.3),
        scale_error_pct: between(-9, 9),
        ...maybe({ noise_sd_kmh: between(0.01, 0.5), noise_seed: 5 }),
        ...maybe({
          pulses_per_turn: oneOf(1, 16, 48),
          wheel_circumference_m: 1.9,
          ...oneOf<object>({ counting_window_s: between(0.05, 0.4) }, { timer_resolution_s: 0.000_01 }),
        }),
      },
    }),
    ...maybe({
      traction: {
        friction_dry: between(0.4, 1.2),
        friction_wet: between(0.15, 0.4),
        wheelbase_m: 1.3,
        mass_centre_ahead_m: between(0.5, 0.8),
        mass_centre_height_m: between(0.4, 0.8),
      },
    }),
  };
}
