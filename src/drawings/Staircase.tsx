import { CONDITION_WORDS, type Condition } from './condition';
import { Hatch } from './Hatch';
import { listed, quantity } from './numbers';
import { SCREEN, type Paint } from './paint';
import {
  staircaseGeometry,
  type Run,
  type StaircaseGeometry,
  type StaircaseInput,
  type Step,
} from './staircase-geometry';
import { staircase } from '../words/drawings-strings';

interface Props extends StaircaseInput {
  /** Unique in the document. */
  id: string;
  width?: number;
  height?: number;
  paint?: Paint;
  className?: string;
}

const FONT = { fontSize: 12, fontFamily: 'inherit' } as const;

function bandOf(condition: Condition, paint: Paint): { ground: string; text: string; line: string } {
  switch (condition) {
    case 'stuck':
      return { ground: paint.rustWash, text: paint.rustInk, line: paint.rust };
    case 'not_shutting_down':
      return { ground: paint.crimsonWash, text: paint.crimson, line: paint.crimson };
    case 'shutdown':
      return { ground: paint.plumWash, text: paint.plum, line: paint.plum };
    default:
      return { ground: 'none', text: paint.ink2, line: paint.slate };
  }
}

/** What the picture shows, for who cannot see it. */
export function staircaseInWords(g: StaircaseGeometry, input: StaircaseInput): string {
  const parts = [staircase.voltageStaircaseOfPositions(input.slots.length)];
  if (input.voltage !== null) parts.push(staircase.theStringGives(input.voltage));
  const expected = input.expectedInShutdown ?? input.expectedVoltage;
  if (expected !== null) parts.push(staircase.expected(expected));
  if (g.total)
    parts.push(
      g.total.passing === null
        ? staircase.itsUnitsTellNothing
        : staircase.thatIsWhatOf(g.total.passing, g.total.of),
    );
  const conditions: Condition[] = [
    'not_shutting_down',
    'stuck',
    'shutdown',
    'silent',
    'unheard',
    'dark',
    'empty',
  ];
  for (const condition of conditions) {
    const at = g.steps.filter((s) => s.condition === condition).map((s) => s.position);
    if (at.length === g.steps.length && at.length > 0)
      parts.push(staircase.allAre(CONDITION_WORDS[condition]));
    else if (at.length > 0)
      parts.push(
        `${at.length === 1 ? staircase.position : staircase.positions} ${listed(at)}: ${CONDITION_WORDS[condition]}.`,
      );
  }
  return parts.join(' ');
}

function Band({ run, g, paint, id }: { run: Run; g: StaircaseGeometry; paint: Paint; id: string }) {
  const { ground, text } = bandOf(run.condition, paint);
  const word = CONDITION_WORDS[run.condition];
  const fits = run.width >= word.length * 6.3;
  const middle = run.x + run.width / 2;
  return (
    <g>
      {ground !== 'none' && (
        <rect x={run.x} y={g.plot.top} width={run.width} height={g.plot.bottom - g.plot.top} fill={ground} />
      )}
      {run.condition === 'silent' && (
        <rect
          x={run.x}
          y={g.plot.top}
          width={run.width}
          height={g.plot.bottom - g.plot.top}
          fill={`url(#${id}-hatch)`}
          opacity="0.28"
        />
      )}
      {fits ? (
        <text x={middle} y={g.plot.top + 14} textAnchor="middle" fill={text} fontWeight="600" {...FONT}>
          {word}
        </text>
      ) : (
        <text
          transform={`translate(${middle + 4} ${g.plot.top + 6}) rotate(90)`}
          fill={text}
          fontWeight="600"
          {...FONT}
        >
          {run.width >= 11 ? word : ''}
        </text>
      )}
    </g>
  );
}

/** One slot: its riser and tread, or what stands for them. */
function StepMarks({ step, paint }: { step: Step; paint: Paint }) {
  const { x, width, yFrom, yTo, condition } = step;
  const right = x + width;
  if (condition === 'empty') return null;
  if (condition === 'silent' || condition === 'unheard') {
    const up = Math.min(yFrom - 3, step.yExpected);
    return (
      <rect
        x={x + 1}
        y={up}
        width={Math.max(1, width - 2)}
        height={yFrom - up}
        fill="none"
        stroke={condition === 'silent' ? paint.slate : paint.ink3}
        strokeDasharray={condition === 'silent' ? undefined : '3 3'}
      />
    );
  }
  const low = condition === 'stuck' || condition === 'shutdown';
  const colour = low
    ? bandOf(condition, paint).line
    : condition === 'not_shutting_down'
      ? paint.crimson
      : condition === 'dark'
        ? paint.slate
        : paint.ink;
  const dash = step.assumed ? '5 3' : undefined;
  // in shutdown a unit lets through half a volt, up or down: too little to see, so a hair shows which way
  const hair = low && step.rise !== null && step.rise !== 0 ? -Math.sign(step.rise) * 4 : 0;
  return (
    <g fill="none" stroke={colour} strokeDasharray={dash}>
      {Math.abs(yFrom - yTo) > 0.5 && <path d={`M${x} ${yFrom}V${yTo}`} strokeWidth={low ? 1.5 : 2} />}
      <path d={`M${x} ${yTo}H${right}`} strokeWidth={low ? 3.5 : 2} />
      {hair !== 0 && <path d={`M${right - 1} ${yTo}v${hair}`} strokeWidth="1.5" />}
    </g>
  );
}

function Gap({ g, paint }: { g: StaircaseGeometry; paint: Paint }) {
  if (!g.gap) return null;
  const x = g.plot.right + 6;
  const { yExpected, yMeasured, volts: short } = g.gap;
  const wide = g.width >= 500;
  return (
    <g>
      <path
        d={`M${x - 4} ${yExpected}H${x + 3}V${yMeasured}H${x - 4}`}
        fill="none"
        stroke={paint.rust}
        strokeWidth="1.5"
      />
      {wide && (
        <text x={x + 9} y={(yExpected + yMeasured) / 2 + 4} fill={paint.rustInk} fontWeight="600" {...FONT}>
          −{quantity(short, 'V')}
        </text>
      )}
    </g>
  );
}

/** Where units tell nothing: one total over all positions. */
function Total({ g, paint }: { g: StaircaseGeometry; paint: Paint }) {
  if (!g.total) return null;
  const { left, right, bottom } = g.plot;
  const { y, passing, of } = g.total;
  const words = passing === null ? staircase.positionsUnknown : staircase.ofPassByThe(passing, of);
  return (
    <g>
      <rect x={left} y={y} width={right - left} height={Math.max(0, bottom - y)} fill={paint.petrolWash} />
      <path d={`M${left} ${y}H${right}`} stroke={paint.ink} strokeWidth="2" />
      <text
        x={(left + right) / 2}
        y={Math.min(bottom - 8, y + 20)}
        textAnchor="middle"
        fill={paint.ink2}
        fontWeight="600"
        {...FONT}
      >
        {words}
      </text>
    </g>
  );
}

/**
 * The staircase: a string as cumulative voltage along its positions. A passing unit is a riser, a unit in
 * shutdown a flat tread; the expected staircase is dotted, a bracket measures the gap, what is assumed from a
 * claim is dashed.
 */
export function Staircase({
  id,
  width = 880,
  height = 330,
  paint = SCREEN,
  className = '',
  ...input
}: Props) {
  const g = staircaseGeometry(input, width, height);
  const { left, right, bottom } = g.plot;
  const bold = (s: Step) =>
    s.condition !== 'empty' && g.runs.some((r) => s.position >= r.from && s.position <= r.to);
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      role="img"
      aria-label={staircaseInWords(g, input)}
      className={className}
      style={{ height: 'auto' }}
    >
      <defs>
        <Hatch id={`${id}-hatch`} colour={paint.slate} step={6} />
      </defs>
      {g.runs.map((run) => (
        <Band key={run.from} run={run} g={g} paint={paint} id={id} />
      ))}
      {g.ticks.map(({ value, y }, i) => (
        <g key={value}>
          <path d={`M${left} ${y}H${right}`} stroke={i === 0 ? paint.rule : paint.ruleFaint} />
          <text x={left - 10} y={y + 4} textAnchor="end" fill={paint.ink2} {...FONT}>
            {i === g.ticks.length - 1 ? `V ${value}` : value}
          </text>
        </g>
      ))}
      {!g.total &&
        g.steps.map((s) =>
          s.rise !== null && s.yFrom - s.yTo > 0.5 ? (
            <rect
              key={s.position}
              x={s.x}
              y={s.yTo}
              width={s.width}
              height={s.yFrom - s.yTo}
              fill={s.condition === 'not_shutting_down' ? paint.crimsonWash : paint.petrolWash}
              opacity="0.75"
            />
          ) : null,
        )}
      <Total g={g} paint={paint} />
      <path
        d={g.expectedPath}
        fill="none"
        stroke={paint.ink3}
        strokeWidth="1.5"
        strokeDasharray="1.5 4"
        strokeLinecap="round"
      />
      {!g.total && g.steps.map((s) => <StepMarks key={s.position} step={s} paint={paint} />)}
      <Gap g={g} paint={paint} />
      {g.steps
        .filter((s) => g.labels.has(s.position))
        .map((s) => (
          <text
            key={s.position}
            x={s.x + s.width / 2}
            y={bottom + 18}
            textAnchor="middle"
            fill={bold(s) ? bandOf(s.condition, paint).text : paint.ink2}
            fontWeight={bold(s) ? 700 : 400}
            {...FONT}
          >
            {s.condition === 'empty' ? '–' : s.position}
          </text>
        ))}
      <text x={left} y={bottom + 35} fill={paint.ink2} {...FONT}>
        {staircase.positionAlongTheString}
      </text>
    </svg>
  );
}
