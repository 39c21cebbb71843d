import type { Margin } from './answer.ts';

const WIDTH = 208;
const TOP = 8;
const THICK = 7;

/** The margin of an answer, drawn; what it says stands in the sentence above. */
export function MarginGraph({ margin }: { readonly margin: Margin }) {
  return (
    <svg
      className="margin"
      viewBox={`0 0 ${WIDTH + 12} 36`}
      aria-hidden="true"
      preserveAspectRatio="xMinYMin meet"
    >
      {margin.kind === 'dots' && <Dots margin={margin} />}
      {margin.kind === 'bar' && <Bar margin={margin} />}
      {margin.kind === 'band' && <Band margin={margin} />}
    </svg>
  );
}

function Dots({ margin }: { readonly margin: Extract<Margin, { kind: 'dots' }> }) {
  const half = (WIDTH / 2) * margin.allowed;
  return (
    <>
      <rect className="track" x={WIDTH / 2 - half} y={TOP} width={2 * half} height={THICK} />
      <path className="tick" d={`M${WIDTH / 2} ${TOP - 5}V${TOP + THICK + 5}`} />
      {margin.dots.map((dot, i) => (
        <circle
          // biome-ignore lint/suspicious/noArrayIndexKey: dots have no name and no state
          key={i}
          className={`dot${dot.worst ? ' worst' : ''}${dot.out ? ' out' : ''}`}
          cx={Math.min(WIDTH - 4, Math.max(4, dot.at * WIDTH))}
          cy={TOP + THICK / 2}
          r={dot.worst ? 4 : 3}
        />
      ))}
      <text x={0} y={33}>
        {margin.ends[0]}
      </text>
      <text x={WIDTH} y={33} textAnchor="end">
        {margin.ends[1]}
      </text>
    </>
  );
}

function Bar({ margin }: { readonly margin: Extract<Margin, { kind: 'bar' }> }) {
  return (
    <>
      <rect className="track" x={0} y={TOP} width={WIDTH} height={THICK} />
      <rect
        className={`fill${margin.over ? ' over' : ''}`}
        x={0}
        y={TOP}
        width={margin.filled * WIDTH}
        height={THICK}
      />
      {margin.limit !== null && (
        <path className="tick" d={`M${margin.limit * WIDTH} ${TOP - 5}V${TOP + THICK + 5}`} />
      )}
      {margin.labels.map((label) => (
        <text
          key={label.at}
          x={label.at * WIDTH}
          y={33}
          textAnchor={label.at === 0 ? 'start' : label.at > 0.85 ? 'end' : 'middle'}
        >
          {label.text}
        </text>
      ))}
    </>
  );
}

function Band({ margin }: { readonly margin: Extract<Margin, { kind: 'band' }> }) {
  const half = (margin.half * WIDTH) / 2;
  return (
    <>
      <path className="tick" d={`M0 ${TOP + THICK / 2}H${WIDTH}`} opacity={0.25} />
      <rect className="bandfill" x={WIDTH / 2 - half} y={TOP} width={2 * half} height={THICK} />
      <path className="tick" d={`M${WIDTH / 2} ${TOP - 5}V${TOP + THICK + 5}`} />
      {half < 36 ? (
        <text x={WIDTH / 2} y={33} textAnchor="middle">
          ±{margin.label}
        </text>
      ) : (
        <>
          <text x={Math.max(0, WIDTH / 2 - half)} y={33} textAnchor={half > 80 ? 'start' : 'middle'}>
            −{margin.label}
          </text>
          <text x={Math.min(WIDTH, WIDTH / 2 + half)} y={33} textAnchor={half > 80 ? 'end' : 'middle'}>
            +{margin.label}
          </text>
        </>
      )}
    </>
  );
}
