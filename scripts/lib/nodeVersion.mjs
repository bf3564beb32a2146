// Imported first by every script, before anything that an older Node would stumble over.
import process from 'node:process'

const [major, minor] = process.versions.node.split('.').map(Number)
if (major < 20 || (major === 20 && minor < 19)) {
  console.error(`Smoothside needs Node.js 20.19 or newer; this is ${process.versions.node}. Install a newer Node.js 20 and start again.`)
  process.exit(1)
}
