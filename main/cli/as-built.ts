import { main } from './as-built-command.ts';
import { speak } from './command.ts';

await speak(main);
