import { ruleTicks } from './rule.series';

/** A rule from 0 to `max`, as wide as its place: base line, ticks upwards, numbers above them. */
export function Rule({ max, labelsMost = 5 }: { max: number; labelsMost?: number }) {
  const ticks = ruleTicks(max, labelsMost);
  return (
    <svg aria-hidden className="block h-5 w-full overflow-visible text-tick">
      <line x1="0" x2="100%" y1="19.5" y2="19.5" stroke="currentColor" />
      {ticks.map((tick) => (
        <g key={tick.value}>
          <line
            x1={`${tick.ratio * 100}%`}
            x2={`${tick.ratio * 100}%`}
            y1={tick.long ? 7 : 14}
            y2="19.5"
            stroke="currentColor"
          />
          {tick.label ? (
            <text
              x={`${tick.ratio * 100}%`}
              dx={tick.ratio > 0.95 ? -3 : 3}
              y="13"
              textAnchor={tick.ratio > 0.95 ? 'end' : 'start'}
              className="figure fill-soft text-[12px]"
            >
              {tick.label}
            </text>
          ) : null}
        </g>
      ))}
      <line x1="100%" x2="100%" y1="7" y2="19.5" stroke="currentColor" />
    </svg>
  );
}
