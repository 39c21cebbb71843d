import { speak } from './command.ts';
import { main } from './solve-command.ts';

await speak(main);
