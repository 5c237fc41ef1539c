import { Worker } from 'node:worker_threads'

/**
 * Starts a TypeScript file as a worker thread. On Node 20 the loader that the process runs under does not reach into workers, so a
 * line of plain JavaScript registers it there first. `packages` are the large packages that the file imports: they are loaded
 * ahead of the loader, which has nothing to do in them and would take its time.
 */
export function startWorker(file: URL, workerData: unknown, packages: readonly string[] = []): Worker {
  const loader = JSON.stringify(import.meta.resolve('tsx/esm/api'))
  const ahead = JSON.stringify(packages.map((name) => import.meta.resolve(name)))
  const boot = `Promise.all([import(${loader}), ...${ahead}.map((url) => import(url))]).then(([loader]) => { loader.register(); return import(${JSON.stringify(file.href)}) })`
  return new Worker(boot, { eval: true, workerData, execArgv: [] })
}
