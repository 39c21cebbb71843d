import { main } from './bring-in-command.ts';
import { speak } from './command.ts';

await speak(main);
