/**
 * What the page gets of the desktop: three named functions, nothing of the modules behind them.
 * A sandboxed preload is CommonJS; it is built as it stands.
 */
{
  const { contextBridge, ipcRenderer, webUtils } = require('electron') as typeof import('electron');

  contextBridge.exposeInMainWorld('channelwright', {
    call: (name: string, body: Uint8Array): Promise<Uint8Array> =>
      ipcRenderer.invoke('channelwright:request', name, body),
    listen: (listener: (name: string, data: string) => void): (() => void) => {
      const heard = (_event: unknown, name: string, data: string): void => listener(name, data);
      ipcRenderer.on('channelwright:event', heard);
      return () => ipcRenderer.off('channelwright:event', heard);
    },
    pathOf: (file: unknown): string => {
      try {
        return webUtils.getPathForFile(file as Parameters<typeof webUtils.getPathForFile>[0]);
      } catch {
        return '';
      }
    },
  });
}
