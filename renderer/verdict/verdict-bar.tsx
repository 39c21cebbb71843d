import { memo, useEffect, useMemo, useRef, useState } from 'react';
import { usePage } from '../page/context.tsx';
import { useAnswer } from '../state/live.ts';
import { useStore } from '../state/store.ts';
import { type Answer, plainText } from './answer.ts';
import { MarginGraph } from './margin.tsx';
import { verdicts } from './verdicts.ts';

/** The five questions, always on screen. */
export function VerdictBar() {
  const { desk, preferences } = usePage();
  const project = useStore(desk.project)!;
  const solved = useAnswer(desk);
  const { units } = useStore(preferences.store);
  useEffect(() => desk.solver.speak(units), [desk, units]);
  const chip = solved.chip ?? project.document.chip;
  const busy = solved.busy || solved.waiting > 0;
  // a newer result's five answers are here before it
  const short = useStore(desk.solver.short);
  const own = useMemo(
    () =>
      verdicts({
        chip,
        result: solved.result,
        trouble: solved.problem?.what ?? '',
        waiting: solved.waiting,
        preview: solved.preview,
      }),
    [chip, solved.result, solved.problem, solved.waiting, solved.preview],
  );
  const answers = short ?? own;
  return (
    <section
      className="verdicts"
      aria-label="The five answers"
      aria-busy={busy}
      data-preview={solved.preview || undefined}
    >
      {answers.map((answer) => (
        <Verdict key={answer.question} answer={answer} />
      ))}
      <Announcement answers={answers} busy={busy} />
    </section>
  );
}

const Verdict = memo(function Verdict({ answer }: { readonly answer: Answer }) {
  const { commands } = usePage();
  const { culprit } = answer;
  const text = plainText(answer.says);
  const says = answer.says.map((run, i) =>
    // biome-ignore lint/suspicious/noArrayIndexKey: runs of one sentence have their place alone
    typeof run === 'string' ? <span key={i}>{run}</span> : <strong key={i}>{run.strong}</strong>,
  );
  return (
    <article className="verdict" data-standing={answer.standing} data-length={lengthOf(text)}>
      <h2 className="verdict-question">{answer.question}</h2>
      {culprit ? (
        <button type="button" className="verdict-says" title={text} onClick={() => commands.show(culprit)}>
          {says}
        </button>
      ) : (
        <p className="verdict-says" title={text}>
          {says}
        </p>
      )}
      {answer.margin && <MarginGraph margin={answer.margin} />}
    </article>
  );
});

/** Long sentences are set smaller where they would not have room. */
const lengthOf = (text: string): string | undefined =>
  text.length > 104 ? 'very long' : text.length > 82 ? 'long' : undefined;

/** Says each new set of answers once, when the hand has stopped. */
function Announcement({ answers, busy }: { readonly answers: readonly Answer[]; readonly busy: boolean }) {
  const text = answers.map((answer) => `${answer.question} ${plainText(answer.says)}`).join(' ');
  const [said, setSaid] = useState('');
  const last = useRef('');
  useEffect(() => {
    if (busy || text === last.current) return;
    const timer = setTimeout(() => {
      last.current = text;
      setSaid(text);
    }, 900);
    return () => clearTimeout(timer);
  }, [text, busy]);
  return (
    <p className="aside" role="status" aria-live="polite">
      {said}
    </p>
  );
}
