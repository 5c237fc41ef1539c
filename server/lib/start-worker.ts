import { Worker } from 'node:worker_threads'

/**
 * Starts a TypeScript file as a worker thread. On Node 20 the loader that the process runs under does not reach into workers, so a
 * line of plain JavaScript registers it there first.
 */
export function startWorker(file: URL, workerData: unknown): Worker {
  const loader = JSON.stringify(import.meta.resolve('tsx/esm/api'))
  const boot = `import(${loader}).then((loader) => { loader.register(); return import(${JSON.stringify(file.href)}) })`
  return new Worker(boot, { eval: true, workerData, execArgv: [] })
}
