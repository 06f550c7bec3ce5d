import { driveLag, kind, list, mapping, number, optional, otherwise } from './fields.ts';
import { peakPower } from './force-schema.ts';

const charge = number('%', 0, 100, 'Charge, increasing');

const battery = mapping('Battery', {
  capacity_wh: number('Wh', 1, 1000000, 'Usable energy between full and empty'),
  charge_pct: otherwise(
    number('%', 0, 100, 'Charge at the start of the route'),
    100,
    'not given: the run starts with a full battery',
  ),
  reserve_pct: otherwise(
    number('%', 0, 99, 'Charge at which the range ends'),
    0,
    'not given: the range ends when the battery is empty',
  ),
  open_voltage: optional(
    list(
      mapping('Row', { charge_pct: charge, v: number('V', 1, 2000, 'Voltage without load') }),
      2,
      100,
      'Open-circuit voltage over charge; between rows on a straight line, beyond the ends constant',
    ),
    'none',
    'not given: the voltage does not sag',
  ),
  resistance_ohm: optional(number('ohm', 0, 100, 'Inner resistance')),
  nominal_v: optional(number('V', 1, 2000, 'Voltage at which the drive gives its peak power')),
  full_fade: optional(
    list(
      mapping('Row', {
        charge_pct: charge,
        accepts_pct: number('%', 0, 100, 'Share of full regeneration that the battery takes'),
      }),
      2,
      100,
      'What the battery takes over its charge; between rows on a straight line, beyond the ends constant',
    ),
    'none',
    'not given: a full battery takes all of the regeneration',
  ),
});

const heating = mapping('Derating by time at power', {
  continuous_power_kw: number('kW', 0.01, 500, 'Power at the wheel that can be kept for good'),
  peak_power_s: number('s', 1, 100000, 'Time that a cold drive can give its peak power'),
  onset_pct: otherwise(
    number('%', 1, 99, 'Share of the heat at which derating begins'),
    80,
    'an assumed round figure',
  ),
});

/** An electric drive. */
export const electricSchema = mapping(
  'Electric motor: force-power envelope, regeneration down to throttle -100 %',
  {
    kind: kind('electric'),
    peak_force_n: number('N', 1, 20000, 'Greatest force at the wheel'),
    peak_power_kw: peakPower,
    regeneration_force_n: otherwise(
      number('N', 0, 20000, 'Greatest force that regeneration holds back with, written positive'),
      0,
      'not given: no regeneration',
    ),
    regeneration_power_kw: optional(
      number('kW', 0.01, 500, 'Greatest power that regeneration takes at the wheel'),
      'none',
      'not given: no power limit of its own',
    ),
    regeneration_fade_kmh: otherwise(
      number('km/h', 0, 50, 'Speed below which drag and regeneration fade to nothing at a standstill'),
      8,
      'an assumed round figure, about 2 m/s: a motor cannot hold back at a standstill',
    ),
    closed_throttle_force_n: otherwise(
      number('N', 0, 5000, 'Drag of the motor at closed throttle, written positive'),
      0,
      'ideal: no drag at closed throttle',
    ),
    efficiency_pct: optional(
      mapping('Efficiencies [%]', {
        drive: number('%', 1, 100, 'Wheel energy over battery energy'),
        regeneration: number(
          '%',
          0,
          100,
          'Battery energy over wheel energy, the drag not counted: it charges nothing',
        ),
      }),
      'none',
      'not given: no constant efficiency',
    ),
    loss_map: optional(
      mapping('Losses between battery and wheel', {
        speed_kmh: list(number('km/h', 0, 400, 'Speed of a row'), 2, 100, 'Speeds, increasing [km/h]'),
        force_n: list(
          number('N', -20000, 20000, 'Wheel force of a column; negative regenerates'),
          2,
          100,
          'Wheel forces, increasing [N]',
        ),
        loss_w: list(
          list(number('W', 0, 500000, 'Loss'), 2, 100, 'Row at one speed [W]'),
          2,
          100,
          'A row for each speed, in it a loss for each force [W]',
        ),
      }),
      'none',
      'not given: no map of losses',
    ),
    battery: optional(battery, 'none', 'not given: no charge, no sag of the voltage'),
    heating: optional(heating, 'none', 'not given: the drive does not heat up'),
    lag_s: driveLag,
  },
);
