import { enableCompileCache } from 'node:module';
import { join } from 'node:path';

// JavaScript, because this runs before what is compiled is kept: a second start finds the sources compiled,
// their types taken off, and does not even load what takes them off. Threads take the folder from the environment.
const folder = join(import.meta.dirname, '..', 'node_modules', '.cache', 'channelwright');
const { directory } = enableCompileCache(folder);
if (directory) process.env.NODE_COMPILE_CACHE ??= folder;
