import { expect, test } from 'vitest'

import { chartIdSchema } from '#shared/lib/ids.ts'

import { paths, toLocalPath } from './paths.ts'

test('what goes into an address is escaped', () => {
  expect(paths.api.symptoms('won’t start & dies')).toBe('/api/symptoms?q=won%E2%80%99t%20start%20%26%20dies')
  expect(paths.api.link('a/b?c')).toBe('/api/links/a%2Fb%3Fc')
  expect(paths.api.chartVersion(chartIdSchema.parse('no-full-speed'), 4)).toBe('/api/charts/no-full-speed/versions/4')
  expect(paths.api.walks({ scope: 'shop', page: 2 })).toBe('/api/walks?scope=shop&page=2')
})

test('sign-in leads back to a page of ours and never to another address', () => {
  expect(paths.signIn('/walks/1?x=2')).toBe('/sign-in?next=%2Fwalks%2F1%3Fx%3D2')
  expect(paths.signIn('/')).toBe('/sign-in')
  expect(toLocalPath('/walks/1')).toBe('/walks/1')
  for (const foreign of [null, '', 'https://other.example', '//other.example', '/\\other.example', 'javascript:alert(1)'])
    expect(toLocalPath(foreign)).toBe('/')
})
