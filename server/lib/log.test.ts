import { describe, expect, test } from 'vitest'

import { createLog } from './log.ts'

function write(act: (log: ReturnType<typeof createLog>) => void): Record<string, unknown>[] {
  const lines: string[] = []
  act(createLog({ destination: { write: (line: string) => void lines.push(line) } }))
  return lines.map((line) => {
    expect(line.endsWith('\n') && !line.slice(0, -1).includes('\n')).toBe(true)
    return JSON.parse(line) as Record<string, unknown>
  })
}

describe('the log', () => {
  test('writes one JSON object a line, with its moment in UTC, whatever line breaks a person typed', () => {
    const [line, ...more] = write((log) => log.warn({ note: 'one\r\n{"level":"info"}\ntwo' }, 'odd\nwords'))
    expect(more).toEqual([])
    expect(line).toMatchObject({ level: 'warn', note: 'one\r\n{"level":"info"}\ntwo', msg: 'odd\nwords' })
    expect(line?.at).toMatch(/^\d{4}-\d\d-\d\dT[\d:.]+Z$/)
  })

  test('leaves out passwords, tokens, cookies and addresses', () => {
    const [line] = write((log) => log.info({ password: 'pw-secret', body: { token: 'tk-secret' }, request: { headers: { cookie: 'ck-secret', 'set-cookie': 'sc-secret' } }, person: { email: 'em-secret' } }))
    expect(JSON.stringify(line)).not.toMatch(/secret/)
  })

  test('says what failed in the database without the values that were in the statement', () => {
    const cause = Object.assign(new Error('duplicate key value'), { code: '23505', constraint: 'people_email', detail: 'Key (email)=(jo@shop.example) already exists.' })
    const failed = Object.assign(new Error('Failed query: insert … params: jo@shop.example', { cause }), { query: 'insert into people', params: ['jo@shop.example'] })
    const lines = write((log) => {
      log.error({ err: failed })
      log.error(failed)
      log.error({ err: failed }, 'in words')
    })
    expect(JSON.stringify(lines)).not.toContain('jo@shop')
    expect(lines.map((line) => line.msg)).toEqual(['failed', 'failed', 'in words'])
    expect(lines[1]).toMatchObject({ err: { message: 'Failed query: insert into people', cause: { sqlState: '23505', constraint: 'people_email' } } })
  })
})
