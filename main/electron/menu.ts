import { app, Menu, type MenuItemConstructorOptions } from 'electron';

/** What the menu does beyond the roles that the system knows. */
export interface MenuActions {
  /** A command of the page, by the page's name for it. */
  command(name: string): void;
  newWindow(): void;
}

/**
 * The menu. Keys are the page's own (a person can change them) and are only shown here where they
 * cannot differ; roles are the system's.
 */
export function menuTemplate(actions: MenuActions, mac: boolean): MenuItemConstructorOptions[] {
  const command = (label: string, name: string): MenuItemConstructorOptions => ({
    label,
    click: () => actions.command(name),
  });
  const line: MenuItemConstructorOptions = { type: 'separator' };
  const about = command(`About ${app.getName()}`, 'about');
  const own: MenuItemConstructorOptions = {
    label: app.getName(),
    submenu: [
      about,
      line,
      { role: 'services' },
      line,
      { role: 'hide' },
      { role: 'hideOthers' },
      { role: 'unhide' },
      line,
      { role: 'quit' },
    ],
  };
  const file: MenuItemConstructorOptions = {
    label: 'File',
    submenu: [
      { label: 'New window', accelerator: 'CmdOrCtrl+Shift+N', click: () => actions.newWindow() },
      command('New or open …', 'file'),
      ...(mac
        ? [
            {
              role: 'recentDocuments',
              submenu: [{ role: 'clearRecentDocuments' }],
            } as MenuItemConstructorOptions,
          ]
        : []),
      line,
      command('Save as …', 'save as'),
      command('Save a copy', 'save copy'),
      command('Back to how it was at opening', 'revert'),
      line,
      command('Hand over …', 'hand over'),
      line,
      mac ? { role: 'close' } : { role: 'quit' },
    ],
  };
  const edit: MenuItemConstructorOptions = {
    label: 'Edit',
    submenu: [
      command('Undo', 'undo'),
      command('Redo', 'redo'),
      line,
      { role: 'cut' },
      { role: 'copy' },
      { role: 'paste' },
      command('Select all', 'select all'),
      line,
      command('Find a command …', 'find'),
    ],
  };
  const view: MenuItemConstructorOptions = {
    label: 'View',
    submenu: [
      { role: 'resetZoom' },
      { role: 'zoomIn' },
      { role: 'zoomOut' },
      line,
      { role: 'togglefullscreen' },
    ],
  };
  const help: MenuItemConstructorOptions = {
    role: 'help',
    submenu: [command('Keys', 'keys'), ...(mac ? [] : [about])],
  };
  return [...(mac ? [own] : []), file, edit, view, { role: 'windowMenu' }, help];
}

export function setMenu(actions: MenuActions): void {
  Menu.setApplicationMenu(Menu.buildFromTemplate(menuTemplate(actions, process.platform === 'darwin')));
}
