/** A file of the starter: its name in the new folder, and its text. */
export interface StarterFile {
  readonly name: string;
  readonly text: string;
}

const CASE = `# A starter case. Every road, vehicle and figure in it is invented: put your own in their place.
# Run it:  ridgehold run case.yaml
# Keys carry their units. Whatever is left out takes a default; the report lists each with its source.

title: Starter case on an invented road

# The road: a .gpx, .csv or .geojson file, or a written profile such as
# track: {profile: [{length_m: 500, grade_pct: 0}, {length_m: 1500, grade_pct: 6}], vertical_curve_m: 60}
track: {file: track.csv}

road:
  elevation_source: barometric      # exact, lidar, barometric, gnss, dem30 or dem90: sets smoothing and grade uncertainty
  # masks: [{from_km: 1.2, to_km: 1.4, reason: bridge}]   # where the elevation is not that of the road

# wind: {speed_m_s: 4, from_deg: 240}     # blows from; needs positions or a heading in the track
# air: {temperature_c: 15}                # at sea level

vehicle: vehicle.yaml

hold:
  set_speed_kmh: 60
  # changes: [{at_km: 3, set_speed_kmh: 50, ramp_m_s2: 0.6}]
  # gear: 4                         # of an engine with gears; the rider may change it on the way:
  # shifts: [{at_km: 1.2, gear: 3}, {at_km: 2.6, gear: 4}]

rider:
  brakes_above_kmh: 8               # the rider holds this overspeed with the brake
  # bends: {max_lateral_m_s2: 2.5}  # the rider brakes for bends, and resumes behind them; needs positions or a heading in the track
  # does: [{at_km: 0.5, act: tap, taps: 3}, {at_km: 1, act: override, throttle_pct: 80, for_s: 5}, {at_km: 2, act: cancel}, {at_km: 2.3, act: resume}]

# The unit's own rules; without them only the rider ends hold:
# supervisor: {lowest_speed_kmh: 30, too_slow: {below_set_kmh: 20, for_s: 1}, resume_ramp_m_s2: 0.7}
# faults: [{at_km: 1.5, speed_sensor: last_value, for_s: 3}]

candidates:
  # The rider's alternative: a throttle locked in place.
  - {name: locked, kind: locked, throttle: level}
  # Gains worked out from the hill: at most 2 km/h lost on a step of 4 % grade.
  - {name: from-the-hill, kind: pi, design: {droop_kmh: 2, grade_step_pct: 4, damping: 0.8}}
  # Gains worked out from how the set speed is reached.
  - {name: settles-in-30s, kind: pi, design: {settling_s: 30, overshoot_pct: 2}}
  # Gains as they are in a unit of yours.
  - {name: typed, kind: pi, sample_s: 0.02, kp_pct_per_kmh: 4, ti_s: 8, anti_windup: {kind: back_calculation, tracking_s: 4}}
  # There are also kind: p, pid and integer, and beside the gains dead_band, rate_limit_pct_per_s, schedule and observer. This one knows the road:
  # - {name: knows-the-road, kind: pi, kp_pct_per_kmh: 4, ti_s: 8, feedforward: {of: drag_and_grade, grade_from: {kind: known_road, preview_s: 0.3}}}

requirements:
  - {id: R-01, figure: within_band_pct, band_kmh: 2, at_least: 95}    # of the time, where the drive can hold the speed
  - {id: R-02, figure: worst_high_kmh, at_most: 5}

# A ride that was logged on this road, beside the candidates: GPX with times, or CSV with time_s, places, and throttle_pct if you like.
# logged_rides: [{name: monday, file: monday.csv}]

# Every combination of these lists is judged by the requirements too; each list may be left out:
# matrix:
#   loads: [solo, own, two_up, {name: with bags, payload_kg: 30}]
#   winds: [none, {speed_m_s: 6, from_deg: 240}]          # need positions or a heading in the track
#   directions: [there, back]
#   gears: [4, 5]                                         # of an engine with gears
#   set_speeds_kmh: [50, 60]
`;

const VEHICLE = `# An invented light motorcycle: put your own figures in their place.
name: Starter 125
mass: {kerb_kg: 130, rider_kg: 75}  # payload_kg and rotating_kg may follow

# Drag area and rolling resistance ...
road_load: {cda_m2: 0.55, crr: 0.014}
# ... or as regulations publish it:
# road_load: {f0_n: 9.1, f2_n_per_kmh2: 0.0253, test_mass_kg: 205}
# ... or with the rolling resistance of motorcycle tyres at a pressure, or from a regulation's table by mass:
# road_load: {cda_m2: 0.55, tyre_pressure_bar: 2.25}
# road_load: {published: 40 CFR 86.529-98}

# Force at the wheel in the gear that is ridden ...
drive:
  kind: force
  peak_force_n: 340
  peak_power_kw: 8
  closed_throttle_force_n: 45       # what the engine holds back with the throttle closed
  lag_s: 0.15
# ... or an engine with gears, of which hold.gear in the case engages one. There are also kind: variator (a belt) and
# kind: electric (with a battery, if you like).
# drive:
#   kind: engine
#   torque:
#     full_load: [{rpm: 2000, nm: 9}, {rpm: 6500, nm: 10.5}, {rpm: 9500, nm: 8.5}]
#     part_throttle: {shape: 3, at_rpm: 6500}   # steep at small opening, and less torque the faster it turns
#   closed_throttle_drag: [{rpm: 1500, nm: 0.9}, {rpm: 10000, nm: 2.6}]
#   rev_limit_rpm: 10000
#   gear_ratios: [2.8, 1.85, 1.4, 1.1, 0.92, 0.81]
#   primary_ratio: 3.35
#   final_ratio: 2.9
#   wheel_radius_m: 0.3
#   gear: 4
#   gearbox: {kind: clutch}         # the rider shifts, and that cancels the hold; also fixed or automatic
#   lag_s: 0.15

actuator: {lag_s: 0.06, rate_limit_pct_per_s: 400}   # also dead_time_s, resolution_pct, travel_pct, slack_pct
speed_sensor: {filter_s: 0.05, delay_s: 0.02}        # also pulses_per_turn and how they are read, noise_sd_kmh
# traction: {wheelbase_m: 1.3, mass_centre_ahead_m: 0.6, mass_centre_height_m: 0.65}   # grip of the driven wheel
`;

/** Grades of the invented road, each over its length [m], [%]. */
const PIECES: readonly (readonly [length: number, gradePct: number])[] = [
  [700, 0],
  [600, 1.5],
  [500, 3],
  [300, 4.5],
  [400, 2],
  [500, 0],
  [700, -2.5],
  [300, -5],
  [500, -2],
  [500, 0],
];

/** The starter track: a hill up and down, in steps of 20 m, elevations to the centimetre. */
function track(): string {
  const rows = ['distance_m,elevation_m'];
  let distance = 0;
  let elevation = 120;
  rows.push(`${distance},${elevation.toFixed(2)}`);
  for (const [length, gradePct] of PIECES)
    for (let done = 0; done < length; done += 20) {
      distance += 20;
      elevation += (20 * gradePct) / 100;
      rows.push(`${distance},${elevation.toFixed(2)}`);
    }
  return `${rows.join('\n')}\n`;
}

/**
 * The files of `ridgehold new`, all invented: the case first, then its vehicle and its track. The comments are there
 * to be read by someone who sees such a file for the first time.
 */
export function starterCase(): StarterFile[] {
  return [
    { name: 'case.yaml', text: CASE },
    { name: 'vehicle.yaml', text: VEHICLE },
    { name: 'track.csv', text: track() },
  ];
}
