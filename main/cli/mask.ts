import { speak } from './command.ts';
import { main } from './mask-command.ts';

await speak(main);
