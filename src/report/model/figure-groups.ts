/** Figures of candidates side by side, by what they are about. */
export interface FigureGroup {
  readonly words: string;
  /** In the main table, and behind it; in the order of the rows. Figures that no candidate has are left out. */
  readonly shown: readonly string[];
  readonly more: readonly string[];
}

export const FIGURE_GROUPS: readonly FigureGroup[] = [
  {
    words: 'Speed error',
    shown: [
      'within_band_pct',
      'rms_error_kmh',
      'p95_abs_error_kmh',
      'mean_error_kmh',
      'steady_hill_error_kmh',
      'recovery_s',
    ],
    more: ['iae_kmh_s', 'ise_kmh2_s', 'itae_kmh_s2'],
  },
  {
    words: 'Taking over and giving up',
    shown: [
      'engage_sag_kmh',
      'resume_overshoot_kmh',
      'resume_settling_s',
      'command_step_pct',
      'hold_off_s',
      'hold_off_events',
      'hold_cancelled_s',
    ],
    more: [],
  },
  { words: 'Comfort', shown: ['rms_acceleration_m_s2', 'p95_jerk_m_s3'], more: ['speed_change_m_s_per_km'] },
  {
    words: 'Throttle and gears',
    shown: [
      'throttle_travel_pct_per_km',
      'reversals_per_km',
      'at_upper_limit_s',
      'at_lower_limit_s',
      'at_rate_limit_s',
      'shifts',
      'beyond_grip_s',
    ],
    more: ['throttle_mean_pct', 'headroom_p5_pct', 'command_rate_pct_per_s'],
  },
  {
    words: 'Time and energy',
    shown: [
      'time_s',
      'time_lost_s',
      'wheel_energy_wh_per_km',
      'battery_energy_wh',
      'fuel_l_per_100km',
      'range_km',
      'brake_energy_wh',
      'brake_distance_m',
    ],
    more: ['inertial_work_wh_per_km'],
  },
  {
    words: 'Drive quality against the set speed (SAE J2951, from memory)',
    shown: [],
    more: [
      'energy_rating_pct',
      'distance_rating_pct',
      'energy_economy_rating_pct',
      'speed_change_rating_pct',
      'inertial_work_rating_pct',
    ],
  },
];
