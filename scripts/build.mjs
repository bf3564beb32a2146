// npm run build: builds when the sources changed since the last build.
import './lib/nodeVersion.mjs'
import os from 'node:os'
import path from 'node:path'
import process from 'node:process'
import { buildIfChanged } from './lib/build.mjs'
import { runScript, step } from './lib/steps.mjs'

await runScript(() => step('Building the server and the screens', () => buildIfChanged(path.join(os.tmpdir(), `smoothside-build-${process.pid}.log`))))
