import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';

const root = new URL('../..', import.meta.url).pathname;
const folder = mkdtempSync(join(tmpdir(), 'decode-errors-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

interface Answer { code: number | null; stdout: string; stderr: string }

/** The command itself, as the contract names it, from another folder than the project's. */
function decode(...args: string[]): Promise<Answer> {
  return new Promise((done) => {
    const child = execFile('npm', ['run', '--silent', '--prefix', root, 'decode', '--', ...args], { cwd: folder, env: { ...process.env, INIT_CWD: folder } }, (_, stdout, stderr) => done({ code: child.exitCode, stdout, stderr }));
  });
}

function file(name: string, content: string | Uint8Array): string {
  writeFileSync(join(folder, name), content);
  return name;
}

describe('what cannot be read', () => {
  const meta = JSON.stringify({ global: { 'core:datatype': 'ci16_le', 'core:sample_rate': 1e6 }, captures: [{ 'core:sample_start': 0 }] });
  it.each<[string, string, () => string[]]>([
    ['nothing given', 'usage', () => []],
    ['an unknown option', 'usage', () => ['--color', 'red']],
    ['a rate in words', 'usage', () => ['--capture', 'x', '--sample-rate', 'fast']],
    ['a file that is not there', 'not-found', () => ['--capture', 'nowhere.wav']],
    ['a folder', 'unreadable', () => ['--capture', '.']],
    ['an empty capture', 'empty', () => ['--capture', file('e.iq', '')]],
    ['raw samples without a label', 'missing-label', () => ['--capture', file('r.iq', new Uint8Array(64))]],
    ['broken metadata', 'malformed-metadata', () => ['--capture', file('b.sigmf-meta', '{"global": {')]],
    ['metadata without data', 'missing-data-file', () => ['--capture', file('m.sigmf-meta', meta)]],
    ['fronthaul packets', 'not-yet-supported', () => ['--capture', file('f.pcap', new Uint8Array([0xd4, 0xc3, 0xb2, 0xa1, 2, 0, 4, 0]))]],
    ['a snapshot of bytes', 'binary', () => ['--side-a', file('s.json', new Uint8Array(200))]],
    ['a broken snapshot', 'syntax', () => ['--side-b', file('s.json', '{"a": 1,\n "b" 2}')]],
  ])('%s is answered with code %s, exit 2 and one JSON object', async (_, code, args) => {
    const began = performance.now();
    const answer = await decode(...args());
    const { error } = JSON.parse(answer.stdout) as { error: { code: string; message: string } };
    expect(error.code).toBe(code);
    expect(error.message).not.toMatch(/\n\s+at /);
    expect(answer.stderr).not.toMatch(/\n\s+at /);
    expect(answer.code).toBe(2);
    // 2 s on a machine of its own; the tests run beside others.
    expect(performance.now() - began).toBeLessThan(10_000);
  });
});
