import { figureRow } from './figure-table.ts';
import type { Where } from './findings.ts';

/**
 * What a figure that is asked for somewhere is taken over: for `holdable` all of the road, where the figure knows no
 * holdable part of it.
 *
 * @param figure name in the table of figures; one that is not in it is left where it is asked
 */
export const whereMeasured = <Place>(figure: string, where: Place): Place | (Where & 'all') =>
  where === 'holdable' && figureRow(figure)?.wholeRoad === true ? 'all' : where;
