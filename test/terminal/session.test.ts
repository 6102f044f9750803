import { EventEmitter } from 'node:events';
import { describe, expect, it } from 'vitest';
import { createScreen } from '../../src/terminal/screen.ts';
import { openSession } from '../../src/terminal/session.ts';

/** A process and a terminal that only note what is done to them. */
function makeSession(kill: (pid: number, signal: string | number) => true = () => true) {
  const notes: string[] = [];
  const host = Object.assign(new EventEmitter(), {
    pid: 42,
    kill: (pid: number, signal: string | number = 'SIGTERM'): true => {
      notes.push(`kill ${pid} ${signal}`);
      return kill(pid, signal);
    },
  });
  const stdin = Object.assign(new EventEmitter(), {
    setRawMode: (raw: boolean) => notes.push(`raw ${raw}`),
  });
  const written: string[] = [];
  const screen = createScreen({ write: (text) => written.push(text) > 0 });
  const session = openSession({
    host: host as never,
    stdin: stdin as never,
    screen,
    onResume: () => notes.push('resumed'),
  });
  const inside = () => written.join('').lastIndexOf('?1049h') > written.join('').lastIndexOf('?1049l');
  return { host, stdin, session, notes, inside };
}

describe('openSession', () => {
  it('ends by the wish of the person, the terminal given back', async () => {
    const { host, session, notes, inside } = makeSession();
    expect(inside()).toBe(true);
    session.quit();
    expect(await session.over).toEqual({ signal: null });
    session.close();
    session.close();
    expect(inside()).toBe(false);
    expect(notes).toEqual(['raw false', 'raw false']);
    for (const event of ['SIGTERM', 'SIGTSTP', 'SIGCONT', 'uncaughtException', 'exit'])
      expect(host.listenerCount(event)).toBe(0);
  });

  it.each(['SIGINT', 'SIGTERM', 'SIGHUP'] as const)('ends on %s and says which it was', async (signal) => {
    const { host, session } = makeSession();
    host.emit(signal, signal);
    expect(await session.over).toEqual({ signal });
  });

  it('ends when the terminal is hung up or cannot be read', async () => {
    const hung = makeSession();
    hung.stdin.emit('end');
    expect(await hung.session.over).toEqual({ signal: null });
    const broken = makeSession();
    broken.stdin.emit('error', new Error('EIO'));
    expect(await broken.session.over).toEqual({ signal: null });
  });

  it('hands on what nobody caught, and leaves the screen when the process exits under it', async () => {
    const { host, session, inside } = makeSession();
    const error = new Error('nobody caught it');
    host.emit('uncaughtException', error);
    await expect(session.over).rejects.toBe(error);
    host.emit('exit');
    expect(inside()).toBe(false);
  });

  it('lends the terminal to the shell and takes it back when the job is continued', () => {
    const { host, session, notes, inside } = makeSession();
    session.suspend();
    session.suspend();
    expect(inside()).toBe(false);
    expect(host.listenerCount('SIGTSTP')).toBe(0);
    expect(notes).toEqual(['raw false', 'kill 0 SIGTSTP']);
    host.emit('SIGCONT');
    host.emit('SIGCONT');
    expect(inside()).toBe(true);
    expect(notes.slice(2)).toEqual(['raw true', 'resumed']);
    expect(host.listenerCount('SIGTSTP')).toBe(1);
  });

  it('comes back at once where nothing stops, and soon where the stop is ignored', async () => {
    const refused = makeSession(() => {
      throw new Error('ENOSYS');
    });
    refused.session.suspend();
    expect(refused.inside()).toBe(true);
    const ignored = makeSession();
    ignored.session.suspend();
    await new Promise((resolve) => setTimeout(resolve, 300));
    expect(ignored.inside()).toBe(true);
    expect(ignored.notes.at(-1)).toBe('resumed');
  });

  it('does not come back after it was closed', () => {
    const { host, session, inside } = makeSession();
    session.suspend();
    session.close();
    host.emit('SIGCONT');
    expect(inside()).toBe(false);
  });
});
