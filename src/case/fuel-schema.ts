import * as z from 'zod';
import { list, mapping, number, optional, otherwise } from './fields.ts';

const energyContent = {
  heating_value_mj_per_kg: otherwise(
    number('MJ/kg', 5, 130, 'Lower heating value of the fuel'),
    43,
    'from memory: petrol without ethanol, 42 to 44 MJ/kg',
  ),
  density_kg_per_l: otherwise(
    number('kg/l', 0.05, 1.5, 'Density of the fuel'),
    0.745,
    'from memory: about the middle of what EN 228 allows petrol at 15 deg C, 0.720 to 0.775 kg/l',
  ),
  tank_l: optional(
    number('l', 0.1, 200, 'What the tank holds'),
    'none',
    'not given: the range on a tank is not told',
  ),
};

const willansFuel = mapping('Fuel by a straight line over work: P_fuel = (P + friction w) / slope', {
  willans: mapping('Willans line', {
    friction_nm: number('N m', 0, 500, 'Friction torque that the line cuts off'),
    slope_pct: number('%', 10, 100, 'Work at the crankshaft gained for more fuel energy'),
  }),
  ...energyContent,
});

const bsfcFuel = mapping('Fuel by a table of specific consumption over engine speed and torque', {
  bsfc: mapping('Brake specific fuel consumption', {
    rpm: list(number('rpm', 100, 30000, 'Engine speed of a row'), 2, 100, 'Engine speeds, increasing [rpm]'),
    nm: list(number('N m', 0.01, 2000, 'Torque of a column'), 2, 100, 'Crankshaft torques, increasing [N m]'),
    g_per_kwh: list(
      list(number('g/kWh', 30, 20000, 'Fuel for the work'), 2, 100, 'Row at one engine speed [g/kWh]'),
      2,
      100,
      'A row for each engine speed, in it a figure for each torque [g/kWh]',
    ),
    idle_g_per_h: number('g/h', 0, 20000, 'Fuel at idle, without load'),
  }),
  ...energyContent,
});

/** What an engine burns. */
export const fuelSchema = z.union([willansFuel, bsfcFuel]).meta({ description: 'Fuel' });
