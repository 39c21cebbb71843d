import type { Limit } from '../../solver/chip/chip.ts';
import { CONFIRM, REFERENCE_LIMITS } from '../../solver/exposure/reference-limits.ts';
import { figure } from '../words/figure.ts';

type Borne = NonNullable<(typeof REFERENCE_LIMITS)[number]['limit']>;

const stress = (value: number): string => figure(value, 'stress', { digits: 3 });

function words(limit: Borne | null): string {
  if (!limit) return 'draws no line';
  if ('shear' in limit) return `at most ${stress(limit.shear)}`;
  if ('floor' in limit) return `floor ${stress(limit.floor[0])} to ${stress(limit.floor[1])}`;
  return limit.curve
    .map(([time, value]) => `${stress(value)} for ${figure(time, 'time', { digits: 3 })}`)
    .join(', ');
}

/** Published figures side by side, each with its source: to begin from, never to end with. */
export function ReferenceLimits({ onAdd }: { readonly onAdd: (limit: Limit) => string | null }) {
  return (
    <details className="more">
      <summary>Published figures, side by side</summary>
      <p className="soft small">
        Each is a {CONFIRM}: it holds for its cell, medium, temperature and exposure alone.
      </p>
      <ul className="references">
        {REFERENCE_LIMITS.map(({ cells, seen, source, limit }) => (
          <li key={cells}>
            <strong>{cells}</strong> · {words(limit)}
            <span className="soft small">
              {seen} {source}.
            </span>
            {limit && (
              <button
                type="button"
                className="quiet"
                onClick={() => onAdd({ name: `${cells} (${CONFIRM})`, ...limit })}
              >
                Begin from this
              </button>
            )}
          </li>
        ))}
      </ul>
    </details>
  );
}
