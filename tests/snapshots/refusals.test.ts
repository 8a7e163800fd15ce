import { describe, expect, it } from 'vitest';
import { readSnapshot } from '#backend/snapshots/read';
import { bytes, cpuSeconds, refusal } from './support.js';

const repeat = (text: string, count: number): string => text.repeat(count);

/** Ten anchors of nine references each: 9^10 values when written out. */
const aliasBomb = `a: &a [x,x,x,x,x,x,x,x,x]\n${Array.from({ length: 10 }, (_, i) => `${'bcdefghijk'[i]}: &${'bcdefghijk'[i]} [${repeat(`*${'abcdefghij'[i]},`, 9)}]`).join('\n')}\n`;
const entityBomb = `<?xml version="1.0"?>\n<!DOCTYPE r [<!ENTITY a "${repeat('x', 100)}">${Array.from({ length: 9 }, (_, i) => `<!ENTITY ${'bcdefghij'[i]} "${repeat(`&${'abcdefghi'[i]};`, 10)}">`).join('')}]>\n<r>&j;</r>`;

const BOMBS: [string, string, string][] = [
  ['alias bomb', aliasBomb, 'too-many-values'],
  ['an alias that holds itself', 'a: &a\n  b: *a\n', 'too-deep'],
  ['many references', `a: &a {x: 1}\n${repeat('k: *a\n', 50_000)}`, 'too-many-values'],
  ['merge keys without end', `a: &a {x: 1}\nb:\n${repeat('  <<: *a\n', 50_000)}`, 'too-many-values'],
  ['entity bomb', entityBomb, 'doctype'],
  ['external entity', '<!DOCTYPE r SYSTEM "file:///etc/hostname"><r/>', 'doctype'],
  ['deep JSON', `${repeat('[\n', 50_000)}${repeat(']\n', 50_000)}`, 'too-deep'],
  ['deep JSON objects', `${repeat('{"a":\n', 50_000)}1${repeat('}\n', 50_000)}`, 'too-deep'],
  ['deep XML', `${repeat('<a>\n', 50_000)}${repeat('</a>\n', 50_000)}`, 'too-deep'],
  ['deep YAML, one line', `${repeat('- ', 10_000)}x\n`, 'too-deep'],
  ['deep YAML, flow', `a: ${repeat('[', 10_000)}${repeat(']', 10_000)}\n`, 'too-deep'],
  ['deep YAML, indented', Array.from({ length: 2000 }, (_, i) => `${repeat(' ', i)}k:`).join('\n'), 'too-deep'],
  ['deep groups', `${repeat('a = {\n', 50_000)}x = 1;\n${repeat('};\n', 50_000)}`, 'too-deep'],
  ['deep lists in braces', `x = 1;\na = ${repeat('(\n', 50_000)}1${repeat(')\n', 50_000)}`, 'too-deep'],
  ['a giant line of JSON', `{"a": "${repeat('x', 4_000_000)}"}`, 'line-too-long'],
  ['a giant line of YAML', `a: ${repeat('x', 4_000_000)}\n`, 'line-too-long'],
  ['a giant key = value line', `a = ${repeat('x ', 2_000_000)}\n`, 'line-too-long'],
  ['a giant line of XML', `<a b="${repeat('x', 4_000_000)}"/>`, 'line-too-long'],
  ['more than 5 MB', repeat('a: 1\n', 1_200_000), 'too-large'],
  ['a quoted YAML key without end', `"${repeat('a', 60_000)}\n`, 'unknown-syntax'],
];

describe('what would take without end is refused within a second', () => {
  it.each(BOMBS)('%s', (_name, text, code) => {
    const file = bytes(text);
    let error: unknown;
    const seconds = cpuSeconds(() => { error = refusal(() => readSnapshot(file)); });
    expect(error).toMatchObject({ code });
    expect(seconds).toBeLessThan(1);
  });
  it.each([
    ['spaces inside a key', `a = 1\nb${repeat(' ', 200_000)}c\n`],
    ['spaces before a comment', `a = 1\nb = x${repeat(' ', 200_000)}y\n`],
    ['brackets in a section', `a = 1\n[${repeat(' ', 200_000)}x\n`],
    ['colons', `a: 1\n${repeat('a:', 30_000)}\n`],
    ['quotes', `a: ${repeat('"', 30_000)}\n`],
  ])('text that invites backtracking is read, or refused, as fast: %s', (_name, text) => {
    const file = bytes(text);
    const seconds = cpuSeconds(() => {
      try { readSnapshot(file); } catch (error) { expect(error).toHaveProperty('name', 'SnapshotError'); }
    });
    expect(seconds).toBeLessThan(1);
  });
});

describe('each refusal says what, where and what to do', () => {
  const utf16 = (text: string): number[] => [...text].flatMap((c) => [c.charCodeAt(0), 0]);
  it.each([
    ['empty', [], { code: 'empty', offset: 0 }],
    ['blank', [10, 32, 10], { code: 'empty' }],
    ['Latin-1', [...bytes('a: 1\nb: caf'), 0xe9, 10], { code: 'encoding', offset: 11, line: 2 }],
    ['broken in a character', [...bytes('a: 1\nb: '), 0xe2, 0x82], { code: 'encoding', offset: 8, line: 2 }],
    ['a stray continuation', [...bytes('a: '), 0x80], { code: 'encoding', offset: 3, line: 1 }],
    ['UTF-16 without a mark', utf16('technology: nr\n'), { code: 'encoding', offset: 1 }],
    ['UTF-16 with half a character', [0xff, 0xfe, 0x61], { code: 'encoding', offset: 2 }],
    ['UTF-16 with half a pair', [0xff, 0xfe, 0x61, 0, 0x00, 0xd8], { code: 'encoding' }],
    ['UTF-32', [0xff, 0xfe, 0, 0, 0x61, 0, 0, 0], { code: 'encoding' }],
    ['zero bytes', [...bytes('a: 1\nb: '), 0, 10], { code: 'binary', line: 2, offset: 8 }],
    ['zip', [0x50, 0x4b, 3, 4, 9], { code: 'binary' }],
    ['gzip', [0x1f, 0x8b, 8, 0], { code: 'binary' }],
    ['PDF', [...bytes('%PDF-1.7\n')], { code: 'binary' }],
    ['truncated JSON', [...bytes('{"radio": {\n  "subcarrierSpacing": 300')], { code: 'syntax', line: 2 }],
    ['JSON with a trailing comma', [...bytes('{"a": 1,\n}')], { code: 'syntax', line: 2 }],
    ['JSON with a bad escape', [...bytes('{"a": "\\q"}')], { code: 'syntax', line: 1 }],
    ['JSON and something after', [...bytes('{"a": 1}\n{"b": 2}')], { code: 'syntax', line: 2 }],
    ['YAML with bad indentation', [...bytes('a:\n  b: 1\n c: 2\n')], { code: 'syntax', line: 3 }],
    ['YAML with an unknown reference', [...bytes('a: 1\nb: *nothing\n')], { code: 'syntax', line: 2 }],
    ['XML that does not close', [...bytes('<a>\n<b>\n</a>')], { code: 'syntax', line: 3 }],
    ['XML that breaks off', [...bytes('<a>\n<b>1</b>\n')], { code: 'syntax' }],
    ['an unknown entity', [...bytes('<a>&x;</a>')], { code: 'syntax', line: 1 }],
    ['a group that does not close', [...bytes('a = {\n b = 1;\n')], { code: 'syntax' }],
    ['prose', [...bytes('Dear colleague,\nplease find the settings below.\n')], { code: 'unknown-syntax' }],
    ['a lone word', [...bytes('hello')], { code: 'unknown-syntax' }],
  ] as [string, number[], object][])('%s', (_name, content, expected) => {
    const error = refusal(() => readSnapshot(Uint8Array.from(content)));
    expect(error).toMatchObject(expected);
    expect(error.message).toMatch(/\. ?[A-Z]|\.$/);
    expect(error.message.length).toBeGreaterThan(30);
    expect(error.message).not.toMatch(/undefined|NaN|\n|    at /);
  });
});
