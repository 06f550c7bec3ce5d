import type { Drive } from '../../vehicle/drive.ts';

/** An engine stands behind the wheel: its law is over shaft speed in rad/s, and people read it in rpm. */
export const turns = ({ kind }: Pick<Drive, 'kind'>): boolean => kind === 'engine' || kind === 'variator';

/** Several gears to choose from; a belt has one, whose ratio moves. */
export const hasGears = ({ gears }: Pick<Drive, 'gears'>): boolean => gears.length > 1;

/** Gear as riders count, from 1. */
export const gearName = (gear: number): string => `gear\u00a0${gear + 1}`;
