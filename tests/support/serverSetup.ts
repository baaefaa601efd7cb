import type { TestProject } from 'vitest/node'
import './client'
import { startServer } from './server'

/** One built server with the demo for all files of a project; a failure that it logged fails the project. */
export default async function setup(project: TestProject) {
  const server = await startServer()
  project.provide('url', server.url)
  project.provide('dataDir', server.dataDir)
  return async () => {
    await server.stop()
    const failures = server.output().split('\n').filter(line => line.includes('[counterpoise]'))
    if (failures.length) throw new Error(`The server reported failures:\n${failures.join('\n')}`)
  }
}
