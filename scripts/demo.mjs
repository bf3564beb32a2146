// Loads the demo: the built server in one run of its own, as the worker, that ends by itself. Called by start.mjs into an empty installation.
import process from 'node:process'
import { serverEntry } from './lib/build.mjs'

process.env.SMOOTHSIDE_RUN = 'demo'
process.env.SMOOTHSIDE_ROLE = 'web'
process.env.PORT = '0'
await import(serverEntry)
