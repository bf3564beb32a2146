// npm run refold: folds every open round again from its entries and writes anew what lists show. May run while Smoothside does.
import './lib/nodeVersion.mjs'
import os from 'node:os'
import path from 'node:path'
import process from 'node:process'
import { serverEntry } from './lib/build.mjs'
import { data } from './lib/dataFolder.mjs'
import { databaseUrls, withCluster } from './lib/ground.mjs'
import { runProgram } from './lib/processes.mjs'
import { keepSecrets } from './lib/secrets.mjs'
import { runScript, step } from './lib/steps.mjs'

await runScript(() => step('Folding every open round again', () => withCluster('its rounds are being folded', async (cluster) => {
  const { appUrl } = await databaseUrls(cluster)
  const { sessionPassword, secret } = keepSecrets(data.serverKeys, ['sessionPassword', 'secret'])
  const log = path.join(os.tmpdir(), `smoothside-refold-${process.pid}.log`)
  await runProgram('Folding', process.execPath, [serverEntry], { log, env: {
    ...process.env, DATABASE_URL_APP: appUrl, NUXT_SESSION_PASSWORD: sessionPassword, SMOOTHSIDE_SECRET: secret, SMOOTHSIDE_DATA: data.root,
    SMOOTHSIDE_ORIGIN: 'http://127.0.0.1', SMTP_URL: 'smtp://127.0.0.1:1', SMOOTHSIDE_ROLE: 'web', SMOOTHSIDE_RUN: 'refold', HOST: '127.0.0.1', PORT: '0',
  } })
})))
