import { join } from 'node:path'
import express, { Router } from 'express'
import { AppError } from '#server/lib/app-error.ts'

/** The built pages: files under their own names, hashed ones for ever; every address of a screen gets the one document. */
export function createPages(folder: string): Router {
  const router = Router()
  router.use(
    express.static(folder, {
      index: false,
      redirect: false,
      dotfiles: 'ignore',
      setHeaders: (response, path) => {
        response.set('Cache-Control', path.startsWith(join(folder, 'assets')) ? 'public, max-age=31536000, immutable' : 'no-cache')
      },
    }),
  )
  router.get('/{*page}', (request, response, next) => {
    if (isFileName(request.path)) return void next()
    response.set('Cache-Control', 'no-cache')
    response.sendFile('index.html', { root: folder }, (error?: Error & { status?: number }) => {
      if (!error || response.headersSent) return
      next(error.status === 404 ? new AppError('busy', 'The pages have not been built. Run `npm run build`, then load this again.') : error)
    })
  })
  return router
}

/** An address whose last part has a dot, or hides behind one, asks for a file and not for a screen. */
function isFileName(path: string): boolean {
  return path.split('/').some((part) => part.startsWith('.')) || /\.[^/]*$/.test(path)
}
