import { readChip } from '../../solver/chip/schema-chip.ts';
import type { Handlers } from './handlers.ts';

/** What a project keeps beside the chip: trials, results, solved cells. */
export const keptRequests: Handlers<
  | 'trials.freeze'
  | 'trials.list'
  | 'trials.rename'
  | 'trials.delete'
  | 'trials.get'
  | 'results.keep'
  | 'results.get'
  | 'cells.get'
  | 'cells.put'
  | 'view.keep'
> = {
  'trials.freeze': (session, { name, seq, result, chip }) => {
    const { workplace } = session;
    const trial = workplace.project.freezeTrial(name, seq, result, chip && readChip(chip));
    session.touched();
    return trial;
  },
  'trials.list': ({ workplace }) => ({ trials: workplace.project.listTrials() }),
  'trials.rename': (session, { id, name }) => {
    const { workplace } = session;
    const trial = workplace.project.renameTrial(id, name);
    session.touched();
    return trial;
  },
  'trials.delete': (session, { id }) => {
    const { workplace } = session;
    workplace.project.deleteTrial(id);
    session.touched();
    return {};
  },
  'trials.get': ({ workplace }, { id }) => workplace.project.getTrial(id),
  'results.keep': (session, { seq, settings, result }) => {
    const { workplace } = session;
    const kept = workplace.project.keepResult(seq, settings, result);
    if (kept) session.touched();
    return { kept };
  },
  'results.get': ({ workplace }, { settings }) => ({
    seq: workplace.project.position.seq,
    result: workplace.project.findResult(settings),
  }),
  'view.keep': (session, { view }) => {
    session.workplace.project.keepView(view);
    session.touched();
    return {};
  },
  'cells.get': ({ workplace }, { keys }) => ({ found: workplace.project.getCells(keys) }),
  'cells.put': (session, { entries }) => {
    const { workplace } = session;
    workplace.project.putCells(entries);
    session.touched();
    return {};
  },
};
