import { Writable } from 'node:stream';
import { describe, expect, it } from 'vitest';
import { createLog } from './create-log.js';

describe('createLog', () => {
  function written(log: (logger: ReturnType<typeof createLog>) => void) {
    const lines: string[] = [];
    const sink = new Writable({
      write(chunk: Buffer, _encoding, done) {
        lines.push(chunk.toString());
        done();
      },
    });
    log(createLog('info', sink));
    return lines;
  }

  it('leaves out of an error what the database adds: the statement and its values', () => {
    const error = Object.assign(new Error('Deadlock found'), {
      code: 'ER_LOCK_DEADLOCK',
      sql: `INSERT INTO person VALUES ('hash-of-a-password')`,
      parameters: ['hash-of-a-password'],
      driverError: { sql: 'hash-of-a-password' },
    });
    const [line] = written((log) => log.error({ err: error }, 'request failed'));
    expect(line).not.toContain('hash-of-a-password');
    expect(JSON.parse(line!)).toMatchObject({
      msg: 'request failed',
      err: { type: 'Error', message: 'Deadlock found', code: 'ER_LOCK_DEADLOCK' },
    });
    expect(JSON.parse(line!).err.stack).toContain('create-log.spec');
  });

  it('writes the time in UTC and keeps quiet below its level', () => {
    const lines = written((log) => {
      log.debug('nothing');
      log.info('something');
    });
    expect(lines).toHaveLength(1);
    expect(JSON.parse(lines[0]!).time).toMatch(/^\d{4}-\d\d-\d\dT.*Z$/);
  });
});
