/** Which build of the page kept answers with a project, by what was kept of the view; null where none are. */
export function keptBy(view: unknown): string | null {
  const answers = view && typeof view === 'object' && 'answers' in view ? view.answers : null;
  const by = answers && typeof answers === 'object' && 'by' in answers ? answers.by : null;
  return typeof by === 'string' ? by : null;
}
