import { Problem } from '../solver/problem/problem.ts';

/** What a failure of the project file means for the person who works in it. */
export function projectProblem(error: unknown, path: string): Problem {
  if (error instanceof Problem) return error;
  const code = String((error as { code?: unknown }).code ?? '');
  const kept = 'What was acknowledged before is kept.';
  if (code.startsWith('SQLITE_FULL') || code === 'ENOSPC' || code === 'EDQUOT')
    return new Problem(
      'project',
      `There is no room left on the disk; this step was not kept. ${kept}`,
      path,
      'Free some space and do it again.',
    );
  if (code.startsWith('SQLITE_BUSY') || code.startsWith('SQLITE_LOCKED') || code === 'EBUSY')
    return new Problem(
      'project',
      `Another program holds the project file; this step was not kept. ${kept}`,
      path,
      'Close it there and do it again.',
    );
  if (code.startsWith('SQLITE_READONLY') || code === 'EROFS' || code === 'EACCES' || code === 'EPERM')
    return new Problem(
      'project',
      `The project file cannot be written to; this step was not kept. ${kept}`,
      path,
      'Save the project in another folder.',
    );
  if (code.startsWith('SQLITE_CORRUPT') || code.startsWith('SQLITE_NOTADB'))
    return new Problem(
      'project',
      'The project file is damaged; nothing more is written to it.',
      path,
      'Close the project and open it again: what can be read is recovered into a new file.',
    );
  if (code.startsWith('SQLITE_IOERR') || code === 'EIO')
    return new Problem(
      'project',
      `The disk reported a fault; this step was not kept. ${kept}`,
      path,
      'Save the project on another disk.',
    );
  if (code.startsWith('SQLITE_CANTOPEN') || code === 'ENOENT')
    return new Problem(
      'project',
      'The project file is not there or cannot be opened.',
      path,
      'Check that the folder is there and yours to write to.',
    );
  return new Problem(
    'project',
    `This could not be done. ${kept}`,
    path,
    'Try again; if it fails again, save the project under another name.',
  );
}
