import process from 'node:process';
import { startLocalPost } from './local-post';

// The local post as a program beside the demo: `main.ts FOLDER PORT`.
const [folder, port] = process.argv.slice(2);
if (!folder) throw new Error('Name the folder where letters are kept.');
const post = await startLocalPost(folder, Number(port ?? 0));
process.stdout.write(`letters are taken on 127.0.0.1:${post.port}\n`);
for (const signal of ['SIGINT', 'SIGTERM'] as const)
  process.once(signal, () => void post.stop().then(() => process.exit(0)));
