import './mark.ts';
import Plotly, { type Data, type Layout } from 'plotly.js-dist-min';
import { useEffect, useReducer, useRef } from 'react';
import { onTheme, plainPalette } from '../look/theme.ts';
import { FIGURE_FACE, SIZES } from '../look/tokens.ts';

export interface PlotProps {
  readonly title: string;
  readonly data: readonly Data[];
  readonly across: string;
  readonly up: string;
  /** Lines drawn from side to side, with their words. */
  readonly limits?: readonly { readonly at: number; readonly says: string; readonly missed: boolean }[];
  readonly more?: Partial<Layout>;
  /** What the plot says, for those who do not see it. */
  readonly says: string;
}

/** ms in which a change of size, which the library waits 100 ms with, is surely drawn too. */
const RESIZED = 1000;

/** One plot in the page's own type and colours. */
export function Plot({ title, data, across, up, limits = [], more, says }: PlotProps) {
  const surface = useRef<HTMLDivElement>(null);
  /** Ends when what was begun to be drawn is drawn: margins are found in further rounds. */
  const drawing = useRef<Promise<unknown>>(Promise.resolve());
  const [, again] = useReducer((n: number) => n + 1, 0);
  useEffect(() => onTheme(again), []);
  useEffect(() => {
    const look = plainPalette();
    const axis = {
      gridcolor: look.line,
      linecolor: look.line,
      zerolinecolor: look.line,
      tickcolor: look.line,
      ticks: 'outside' as const,
      automargin: true,
    };
    drawing.current = Plotly.react(
      surface.current!,
      [...data],
      {
        margin: { l: 48, r: 8, t: 8, b: 36 },
        paper_bgcolor: look.card,
        plot_bgcolor: look.card,
        font: { family: FIGURE_FACE, size: SIZES.note, color: look.soft },
        xaxis: { ...axis, showgrid: false, title: { text: across } },
        yaxis: { ...axis, title: { text: up } },
        showlegend: false,
        shapes: limits.map(({ at, missed }) => ({
          type: 'line' as const,
          xref: 'paper' as const,
          x0: 0,
          x1: 1,
          y0: at,
          y1: at,
          line: { color: missed ? look.alarm : look.soft, width: 1, dash: 'dash' as const },
        })),
        annotations: limits.map(({ at, says: words, missed }) => ({
          xref: 'paper' as const,
          x: 1,
          y: at,
          text: words,
          showarrow: false,
          xanchor: 'right' as const,
          yanchor: 'bottom' as const,
          font: { color: missed ? look.alarm : look.soft },
        })),
        hoverlabel: { bgcolor: look.card, bordercolor: look.soft, font: { color: look.ink } },
        ...more,
      } as Partial<Layout>,
      { displayModeBar: false, responsive: true, doubleClick: false },
    );
  });
  useEffect(() => {
    const element = surface.current!;
    // Taken away only when drawn: the rounds still to come look at what purging takes.
    return () => {
      const purge = (): void => {
        setTimeout(() => Plotly.purge(element), RESIZED);
      };
      void drawing.current.then(purge, purge);
    };
  }, []);
  return (
    <figure className="plot">
      <figcaption>{title}</figcaption>
      <div ref={surface} className="surface" role="img" aria-label={says} />
    </figure>
  );
}
