// A fresh folder each time, then the built server in this very process, so that a signal reaches it.
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

const folder = mkdtempSync(join(tmpdir(), 'catchwater-browser-'));
process.env.DATA_DIR = folder;
process.on('exit', () => rmSync(folder, { recursive: true, force: true }));
process.argv.push('--demo');
await import('../../build/node/serve.js');
