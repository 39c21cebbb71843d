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
> = {
  'trials.freeze': ({ workplace }, { name, seq, result }) => {
    const trial = workplace.project.freezeTrial(name, seq, result);
    workplace.touched();
    return trial;
  },
  'trials.list': ({ workplace }) => ({ trials: workplace.project.listTrials() }),
  'trials.rename': ({ workplace }, { id, name }) => {
    const trial = workplace.project.renameTrial(id, name);
    workplace.touched();
    return trial;
  },
  'trials.delete': ({ workplace }, { id }) => {
    workplace.project.deleteTrial(id);
    workplace.touched();
    return {};
  },
  'trials.get': ({ workplace }, { id }) => workplace.project.getTrial(id),
  'results.keep': ({ workplace }, { seq, settings, result }) => {
    const kept = workplace.project.keepResult(seq, settings, result);
    if (kept) workplace.touched();
    return { kept };
  },
  'results.get': ({ workplace }, { settings }) => ({
    seq: workplace.project.position.seq,
    result: workplace.project.findResult(settings),
  }),
  'cells.get': ({ workplace }, { keys }) => ({ found: workplace.project.getCells(keys) }),
  'cells.put': ({ workplace }, { entries }) => {
    workplace.project.putCells(entries);
    workplace.touched();
    return {};
  },
};
