import { plainText } from '../verdict/answer.ts';
import { type Swept, standingWords } from './sweep-answers.ts';

const HIGH = 10;

/** The five answers over a sweep: a line each, filled where it is no, and in words. */
export function AnswersStrip({
  points,
  from,
  to,
  says,
}: {
  readonly points: readonly Swept[];
  readonly from: number;
  readonly to: number;
  readonly says: (x: number) => string;
}) {
  const sorted = [...points].sort((a, b) => a.x - b.x);
  const questions = sorted[0]!.answers.map((answer) => answer.question);
  const low = Math.min(from, to);
  const high = Math.max(from, to);
  const step = 100 / Math.max(1, sorted.length - 1);
  const at = (x: number): number => (high > low ? (100 * (x - low)) / (high - low) : 0);
  return (
    <dl className="strips">
      {questions.map((question, q) => (
        <div key={question}>
          <dt>{question}</dt>
          <dd>
            {standingWords(
              sorted.map(({ x, answers }) => ({ x, standing: answers[q]!.standing })),
              says,
            )}
          </dd>
          <svg viewBox={`0 0 100 ${HIGH}`} preserveAspectRatio="none" aria-hidden="true">
            {sorted.map(({ x, answers }) => (
              <rect
                key={x}
                className={answers[q]!.standing.replace(' ', '-')}
                x={Math.max(0, at(x) - step / 2)}
                width={Math.min(100, at(x) + step / 2) - Math.max(0, at(x) - step / 2)}
                y={0}
                height={HIGH}
              >
                <title>{`${says(x)}: ${plainText(answers[q]!.says)}`}</title>
              </rect>
            ))}
          </svg>
        </div>
      ))}
    </dl>
  );
}
