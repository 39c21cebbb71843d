import { speak } from './command.ts';
import { noteMain } from './note-command.ts';

await speak(noteMain);
