/**
 * Holds what was started and ends it: on a signal, on the crash of a part, on the launcher's own failure.
 * A launcher that is killed outright is followed by the guard.
 */
import { lastLines, PlainError, complain, fail, say } from './say.mjs';
import { releaseClone } from './only-one.mjs';
import { startGuard, startProcess } from './processes.mjs';

export class Launcher {
  #parts = [];
  #commands = new Set();
  #ended;
  #finish;
  guard = startGuard();
  stopping = false;

  constructor() {
    this.#ended = new Promise((resolve) => { this.#finish = resolve; });
    for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => this.#onSignal());
    this.#watchNpm();
  }

  /** For runCommand: a command that is under way when the stop comes ends too. */
  track = (child) => {
    this.#commands.add(child);
    child.once('exit', () => this.#commands.delete(child));
    if (this.stopping) child.kill('SIGTERM');
  };

  /** Takes charge of a process part; its unexpected end ends everything. Stopped in reverse order. */
  hold(part) {
    part.onUnexpectedEnd = () => this.#onCrash(part);
    this.#parts.push(part);
    if (part.ended !== undefined) this.#onCrash(part);
    else if (this.stopping) void part.stop();
    return part;
  }

  start(name, options) {
    if (this.stopping) throw new PlainError('stopping');
    return this.hold(startProcess(name, { ...options, guard: this.guard }));
  }

  /** Runs `begin`, then waits for the end, and returns when nothing that was started lives. */
  async run(begin) {
    try {
      await Promise.race([begin(), this.#ended]);
      await this.#ended;
    } catch (error) {
      if (!this.stopping) fail(error);
      await this.stop();
    }
    releaseClone();
    await this.guard.close();
  }

  /** Ends every part, the last started first; the database last of all. */
  async stop() {
    this.stopping = true;
    for (const child of this.#commands) child.kill('SIGTERM');
    const [first, ...others] = this.#parts;
    await Promise.all(others.map((part) => part.stop()));
    await first?.stop();
    this.#finish();
  }

  #onSignal() {
    if (this.stopping) return;
    say('\nStopping');
    this.stopping = true;
    void this.stop().then(() => say('Stopped'));
  }

  #onCrash(part) {
    if (this.stopping) return;
    complain(`\nThe ${part.name} ended unexpectedly (${part.ended}); everything else is being stopped. Its log, ${part.logFile}, ends:\n${lastLines(part)}`);
    process.exitCode = 1;
    this.stopping = true;
    void this.stop();
  }

  /** npm passes signals on, but when npm itself is killed outright nobody is told. */
  #watchNpm() {
    if (!process.env.npm_lifecycle_event) return;
    const parent = process.ppid;
    setInterval(() => { if (process.ppid !== parent) this.#onSignal(); }, 300).unref();
  }
}
