import { matedPlaceSaid } from '../../../words/domain-check-figures';
import { connectorPairFinding } from '../../equipment/connectors';
import type { CheckContext, Figures } from './definition';
import type { FigureWord } from './figure-word';

/** The places where a string's connectors of two types may meet, as keys of the check's figures. */
export const MATED_PLACES = [
  { first: 'moduleLead', second: 'unitInput', place: 'moduleToUnit' },
  { first: 'unitOutput', second: 'homeRun', place: 'stringToHomeRun' },
] as const;

/**
 * What the chosen connector types say: a pair that is neither identical nor documented is a fire risk. The second place
 * is judged where both its halves were chosen; one alone can't be.
 */
export function connectorFigures(figures: Figures, context: CheckContext): FigureWord[] {
  const identity = (key: string) => context.connectors.find((c) => c.id === figures[key]) ?? null;
  return MATED_PLACES.flatMap(({ first, second, place }): FigureWord[] => {
    const a = identity(first);
    const b = identity(second);
    if (first !== 'moduleLead' && !a && !b) return [];
    const found = connectorPairFinding(a, b, context.pairs);
    if (found.fireRisk)
      return [
        {
          weight: 'blocks',
          words: matedPlaceSaid[place](found.words),
          remedy: found.remedy,
          source: found.clause,
          fireRisk: found.outcome === 'not_documented',
        },
      ];
    return found.outcome === 'documented'
      ? [
          {
            weight: 'told',
            words: matedPlaceSaid[place](`${found.words} ${found.evidence ?? ''}`.trim()),
            remedy: null,
            source: found.clause,
          },
        ]
      : [];
  });
}

/** The pair that lacks a document, for whoever may record one; null: none does. */
export function undocumentedPair(
  figures: Figures,
  context: Pick<CheckContext, 'connectors' | 'pairs'>,
): { first: string; second: string; words: string } | null {
  for (const place of MATED_PLACES) {
    const a = context.connectors.find((c) => c.id === figures[place.first]);
    const b = context.connectors.find((c) => c.id === figures[place.second]);
    if (!a || !b) continue;
    const found = connectorPairFinding(a, b, context.pairs);
    if (found.outcome === 'not_documented') return { first: a.id, second: b.id, words: found.words };
  }
  return null;
}
