import { DIM_BELOW_ELEVATION } from '../../../src/domain/verdicts/context';
import { PASSING, SHUTDOWN } from '../../../simulator/plant/string-plant';
import type { SitePlant } from '../../../simulator/plant/site-plant';
import type { StringPlan } from '../../../simulator/plant/plan';

/** Share of a fault's units that must show its verdict before somebody asks for the cause. */
export const NOT_MEASURED_BELOW = 0.5;
/** A sound unit has followed its release by then, seconds. */
const RELEASE_TAKES_S = 30;
const TIME_LIMIT_S = 30;

/** Degrees that the sun climbs in the minute by which a logger's clock may be late: nobody is stuck before that. */
const CLOCK_MARGIN = 0.25;
/** Degrees by which a logger's clock that is off may move dawn. */
const DAWN_MARGIN = 1;

export interface StringTruth {
  stuck: boolean[];
  /** The same within a degree of dawn, where a clock that is off decides: said then, it is right and not early. */
  nearlyStuck: boolean[];
  keeps: boolean[];
}

/**
 * What is so at this moment, from the plant alone: a unit is stuck when it is in shutdown in daylight although its zone
 * is released and (by keep-alive) a transmitter that is meant for it sends; it does not shut down when it passes more
 * than the time limit after its zone's initiator was opened.
 */
export function stringTruth(
  plant: SitePlant,
  plan: StringPlan,
  openSinceS: number | undefined,
  releasedSinceS: number | undefined,
): StringTruth {
  const s = plant.byName.get(plan.name)!;
  const { elevation } = plant.now;
  const sends =
    s.unitType.releasedBy === 'logger' || plan.transmitters.some((t) => plant.commands.transmits(t));
  const released =
    releasedSinceS !== undefined &&
    plant.commands.released(plan.zone) &&
    sends &&
    plant.atS > releasedSinceS + RELEASE_TAKES_S;
  const shut = openSinceS !== undefined && plant.atS > openSinceS + TIME_LIMIT_S;
  const modes = [...s.mode];
  return {
    stuck: modes.map((m) => released && elevation >= DIM_BELOW_ELEVATION + CLOCK_MARGIN && m === SHUTDOWN),
    nearlyStuck: modes.map(
      (m) => released && elevation >= DIM_BELOW_ELEVATION - DAWN_MARGIN && m === SHUTDOWN,
    ),
    keeps: modes.map((m) => shut && m === PASSING),
  };
}
