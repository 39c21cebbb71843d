import type { Command } from './command.ts';

/** Commands that hold every word, in title before group before help; all, in their order, without words. */
export function findCommands(all: readonly Command[], words: string): readonly Command[] {
  const wanted = words.toLowerCase().split(/\s+/).filter(Boolean);
  if (wanted.length === 0) return all;
  const rank = (command: Command): number => {
    let total = 0;
    const title = command.title.toLowerCase();
    for (const word of wanted) {
      if (title.startsWith(word)) total += 0;
      else if (title.split(/[\s-]+/).some((part) => part.startsWith(word))) total += 1;
      else if (title.includes(word)) total += 2;
      else if (`${command.group} ${command.help}`.toLowerCase().includes(word)) total += 4;
      else return Number.POSITIVE_INFINITY;
    }
    return total;
  };
  return all
    .map((command, i) => ({ command, i, value: rank(command) }))
    .filter((entry) => Number.isFinite(entry.value))
    .sort((a, b) => a.value - b.value || a.i - b.i)
    .map((entry) => entry.command);
}
