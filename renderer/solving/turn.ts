/** Runs work after the messages that wait already, without the delay of a timer. */
export function afterMessages(): (work: () => void) => void {
  const ports = new MessageChannel();
  const waiting: (() => void)[] = [];
  ports.port1.onmessage = () => waiting.shift()?.();
  return (work) => {
    waiting.push(work);
    ports.port2.postMessage(null);
  };
}
