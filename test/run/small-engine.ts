// An invented small engine with four gears and round figures, as a vehicle file has it.
export const ENGINE = {
  kind: 'engine',
  torque: { full_load: [1500, 5000, 9000].map((rpm) => ({ rpm, nm: 10 })), part_throttle: { shape: 0 } },
  closed_throttle_drag: [1500, 9000].map((rpm) => ({ rpm, nm: 1 })),
  idle_rpm: 1400,
  stall_rpm: 900,
  rev_limit_rpm: 9000,
  engine_inertia_kg_m2: 0.01,
  gear_ratios: [3, 2, 1.5, 1.2],
  primary_ratio: 3,
  final_ratio: 3,
  wheel_radius_m: 0.3,
  gear: 4,
  gearbox: { kind: 'clutch', open_s: 0.5, resume_s: 2 },
};
