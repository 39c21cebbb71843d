import { chooseScheme } from '../look/theme.ts';
import type { Desk } from '../state/desk.ts';
import type { Command } from './command.ts';
import { saveAs, saveCopy, saveDescription } from './files.ts';

export function programCommands(desk: Desk): Command[] {
  const open = (): string | null => (desk.chip() ? null : 'Open or begin a chip first.');
  const scheme = (id: string, title: string, choice: 'system' | 'light' | 'dark'): Command => ({
    id,
    title,
    keys: [],
    help: 'How light the page is.',
    group: 'Program',
    run: async () => {
      chooseScheme(choice);
      await desk.client.call('preferences.set', { patch: { scheme: choice } });
    },
  });
  return [
    {
      id: 'find',
      title: 'Find a command',
      keys: ['/'],
      help: 'Search everything the program can do.',
      group: 'Program',
      run: () => desk.view.patch({ palette: true }),
    },
    {
      id: 'chip',
      title: 'Chip and fluid',
      keys: ['i'],
      help: 'Size, layers, fluid, limits and targets of the chip.',
      group: 'Chip',
      why: open,
      run: () => desk.view.patch({ panel: 'chip' }),
    },
    {
      id: 'trials',
      title: 'Compare trials',
      keys: ['b'],
      help: 'Keep the chip as it stands under a name, and compare.',
      group: 'Chip',
      why: open,
      run: () => desk.view.patch({ panel: 'trials' }),
    },
    {
      id: 'as built',
      title: 'As built',
      keys: [],
      help: 'Give what was measured on the made chip: what it does, and which drives restore the targets.',
      group: 'Chip',
      why: open,
      run: () => desk.view.patch({ panel: 'as built' }),
    },
    {
      id: 'hand over',
      title: 'Hand over',
      keys: ['e'],
      help: 'The fabrication note, the flow-split table, masks, tables and the description.',
      group: 'Chip',
      why: open,
      run: () => desk.view.patch({ panel: 'hand over' }),
    },
    {
      id: 'bring in',
      title: 'Bring in a drawing',
      keys: [],
      help: 'Make channels of a DXF, SVG or GDSII drawing, or lay a picture under the sheet to trace.',
      group: 'Chip',
      why: open,
      run: () => desk.view.patch({ panel: 'bring in' }),
    },
    {
      id: 'file',
      title: 'Open another',
      keys: ['Ctrl+o'],
      help: 'Close this chip, which is kept, and go to the start.',
      group: 'Program',
      why: open,
      run: () => desk.close(),
    },
    {
      id: 'save as',
      title: 'Keep at a place of your own',
      keys: ['Ctrl+s'],
      help: 'Choose where the project file lies; from then on every edit goes there.',
      group: 'Chip',
      why: open,
      run: () => saveAs(desk),
    },
    {
      id: 'save copy',
      title: 'Save a copy',
      keys: [],
      help: 'Write a copy of the project beside it and stay here.',
      group: 'Chip',
      why: open,
      run: () => saveCopy(desk),
    },
    {
      id: 'save description',
      title: 'Save the description',
      keys: [],
      help: 'Write the chip as a plain text for scripts.',
      group: 'Chip',
      why: open,
      run: () => saveDescription(desk),
    },
    {
      id: 'revert',
      title: 'As it was at opening',
      keys: [],
      help: 'Go back to how the project was when it was opened; this can be undone.',
      group: 'Chip',
      why: open,
      run: () => desk.revert(),
    },
    {
      id: 'history',
      title: 'What was done',
      keys: [],
      help: 'The list of everything done, newest first.',
      group: 'Chip',
      why: open,
      run: () => desk.view.patch({ panel: 'history' }),
    },
    {
      id: 'keys',
      title: 'Change keys and units',
      keys: ['?'],
      help: 'Every command with its key, to be changed; the units of figures.',
      group: 'Program',
      run: () => desk.view.patch({ panel: 'keys' }),
    },
    {
      id: 'about',
      title: 'About this program',
      keys: [],
      help: 'Version, parts, cautions, and the checks behind its numbers.',
      group: 'Program',
      run: () => desk.view.patch({ panel: 'about' }),
    },
    scheme('scheme system', 'Light or dark with the system', 'system'),
    scheme('scheme light', 'Always light', 'light'),
    scheme('scheme dark', 'Always dark', 'dark'),
  ];
}
