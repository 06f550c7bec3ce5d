import { BUS_LIMITED, BUS_MEASURED, BUS_TARGET } from '../control/bus.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { distanceAt } from './places.ts';
import type { LoopPlan } from './plan.ts';
import type { HoldEvent, HoldEventCause, HoldEventKind } from './result.ts';

/** The events of hold while a run is under way. */
export interface HoldLog {
  readonly events: readonly HoldEvent[];
  /** Keeps an event of the sample that starts now. */
  readonly note: (kind: HoldEventKind, cause: HoldEventCause) => void;
  /** Keeps an event of the sample that starts now, whose set speed is told by `close` once that sample has been run. */
  readonly open: (kind: HoldEventKind, cause: HoldEventCause) => void;
  readonly close: () => void;
}

export function holdLog(machine: Machine, plan: LoopPlan): HoldLog {
  const { s, p } = machine;
  const events: HoldEvent[] = [];
  let opened: Omit<HoldEvent, 'setSpeed'> | null = null;
  const event = (kind: HoldEventKind, cause: HoldEventCause): Omit<HoldEvent, 'setSpeed'> => ({
    time: s[at.TICK] * p[at.P_SAMPLE],
    distance: distanceAt(plan.road, s[at.STATION]),
    kind,
    cause,
    measured: s[BUS_MEASURED],
    command: s[BUS_LIMITED],
  });
  return {
    events,
    note: (kind, cause) => {
      events.push({ ...event(kind, cause), setSpeed: s[BUS_TARGET] });
    },
    open: (kind, cause) => {
      opened = event(kind, cause);
    },
    close: () => {
      if (opened === null) return;
      events.push({ ...opened, setSpeed: s[BUS_TARGET] });
      opened = null;
    },
  };
}
