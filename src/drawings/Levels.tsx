import type { Paint } from './paint';

interface Props {
  levels: readonly number[];
  plot: { left: number; right: number };
  y: (level: number) => number;
  paint: Paint;
  /** How a level is written beside its line. */
  words?: (level: number) => string;
}

/** The lines of a plot's levels, that of nothing stronger than the others, with their figures to the left of them. */
export function Levels({ levels, plot, y, paint, words = String }: Props) {
  return levels.map((level) => (
    <g key={level}>
      <path
        d={`M${plot.left} ${y(level)}H${plot.right}`}
        stroke={level === 0 ? paint.rule : paint.ruleFaint}
      />
      <text
        x={plot.left - 8}
        y={y(level) + 4}
        textAnchor="end"
        fill={paint.ink2}
        fontSize={12}
        fontFamily="inherit"
      >
        {words(level)}
      </text>
    </g>
  ));
}
