import { parameterFacts, uplinkName, type ParameterName } from '#shared/parameters';
import type { FoundValue, Glossary, NotUnderstood, ReadingProblem, Vocabulary } from '../types.js';
import type { TreeNode } from '../syntax/tree.js';
import { glossaryEntryFor } from '../glossary.js';
import { isMplane, mplaneField } from './mplane.js';
import { pathText, step, type Step } from './names.js';
import { plainName } from './plain.js';
import { isRrcStructure, rrcField, rrcTechnology } from './rrc.js';
import { isElsewhere, isUplink } from './scope.js';
import { byIndex } from './enumerations.js';
import { identifierList, interpret } from './values.js';
import { valueTexts } from './nodeValue.js';

/** A value and how much it speaks of the carrier; `container` tells which list item it came from. */
export interface Candidate extends FoundValue { readonly rank: number; readonly container: string }

export interface Visit { readonly steps: readonly Step[]; readonly node: TreeNode; readonly line: number }

export interface Gathered {
  readonly candidates: Candidate[];
  readonly notUnderstood: NotUnderstood[];
  readonly problems: ReadingProblem[];
  /** Every branch on the way, for what absent fields mean. */
  readonly branches: Visit[];
  readonly technologies: { readonly technology: 'nr' | 'lte'; readonly visit: Visit }[];
  readonly glossaryUsed: Set<string>;
}

interface Meaning { readonly parameter: ParameterName; readonly unit: string | null; readonly vocabulary: Vocabulary; readonly rank: number; readonly lowBitsOnly?: boolean; readonly values?: ReadonlyMap<string, string> | null }

/** Walks the file in its order and gathers every value that a vocabulary or the glossary gives a meaning. */
export function gather(root: TreeNode, glossary: Glossary | null): Gathered {
  const gathered: Gathered = { candidates: [], notUnderstood: [], problems: [], branches: [], technologies: [], glossaryUsed: new Set() };
  new Gathering(gathered, glossary, speaksLte(root)).walk({ steps: [], node: root, line: root.line });
  return gathered;
}

/** Whether the file is about LTE: decides whose channel number a management model's centre is. */
function speaksLte(node: TreeNode): boolean {
  if (node.kind === 'list') return node.items.some(speaksLte);
  if (node.kind === 'leaf') return false;
  return node.entries.some((e) => (/^(rw[-_]?)?type$|^technology$/i.test(step(e.key).key) && e.node.kind === 'leaf' && /^(e-?utra|lte)$/i.test(e.node.text)) || speaksLte(e.node));
}

class Gathering {
  constructor(private readonly out: Gathered, private readonly glossary: Glossary | null, private readonly lte: boolean) {}

  walk(visit: Visit): void {
    const { node, steps } = visit;
    if (node.kind === 'branch') {
      this.out.branches.push(visit);
      this.noteDuplicates(visit);
      for (const entry of node.entries) this.entry({ steps: [...steps, ...stepsOf(entry.key)], node: entry.node, line: entry.line });
    } else if (node.kind === 'list') {
      node.items.forEach((item, place) => this.walk({ steps: atPlace(steps, place), node: item, line: item.line }));
    } else this.miss(visit);
  }

  private entry(visit: Visit): void {
    const last = visit.steps.at(-1);
    const technology = last === undefined ? null : rrcTechnology(last);
    if (technology !== null && !isElsewhere(visit.steps)) this.out.technologies.push({ technology, visit });
    const meaning = this.meaning(visit.steps);
    const texts = meaning === null ? null : valueTexts(visit.node, meaning.parameter);
    if (meaning === null || texts === null) this.walk(visit);
    else this.value(visit, meaning, texts);
  }

  private meaning(steps: readonly Step[]): Meaning | null {
    const entry = this.glossary === null ? null : glossaryEntryFor(this.glossary, steps);
    if (entry !== null) {
      this.out.glossaryUsed.add(entry.path);
      return { ...entry.entry, vocabulary: 'glossary', rank: -1 };
    }
    if (isElsewhere(steps) && !isDelay(steps)) return null;
    return this.publicMeaning(steps);
  }

  private publicMeaning(steps: readonly Step[]): Meaning | null {
    const mplane = isMplane(steps) ? mplaneField(steps, this.lte) : null;
    if (mplane !== null) return directed({ ...mplane, unit: mplane.unit ?? null, vocabulary: 'm-plane' }, steps);
    const rrc = rrcField(steps);
    const plain = plainName(steps);
    // Names that both vocabularies know are the standard's only inside the standard's structures.
    if (rrc !== null && (plain === null || steps.some(isRrcStructure))) return directed({ ...rrc, unit: rrc.unit ?? null, vocabulary: 'rrc' }, steps);
    return plain === null ? null : directed({ ...plain, vocabulary: isMplane(steps) ? 'm-plane' : 'plain', rank: 0 }, steps);
  }

  private value(visit: Visit, meaning: Meaning, texts: readonly string[]): void {
    const raw = texts.join(', ');
    const found = this.interpretAll(meaning, texts);
    const place = { path: pathText(visit.steps), line: visit.line };
    if (!found.ok) {
      this.out.problems.push({ code: 'value', message: `Line ${visit.line}: ${place.path}: ${found.reason}. The value is left out.`, ...place });
      this.out.notUnderstood.push({ ...place, raw: raw.slice(0, 200) });
      return;
    }
    if (found.note?.startsWith('no unit') === true) this.out.problems.push({ code: 'unit-assumed', message: `Line ${visit.line}: ${place.path}: ${found.note}.`, ...place });
    const { rank, vocabulary, lowBitsOnly } = meaning;
    this.out.candidates.push({ ...place, parameter: found.parameter ?? meaning.parameter, value: found.value, raw, rank, vocabulary, implied: false, container: pathText(visit.steps.slice(0, -1)), ...(lowBitsOnly === true ? { lowBitsOnly } : {}), ...(found.note === undefined ? {} : { note: found.note }) });
  }

  private interpretAll(meaning: Meaning, texts: readonly string[]): ReturnType<typeof interpret> {
    const translated = texts.map((t) => translate(t, meaning.values ?? null));
    const untranslated = translated.indexOf(null);
    if (untranslated >= 0) return { ok: false, reason: `the glossary has no word for "${texts[untranslated]}"` };
    const words = translated as string[];
    if (parameterFacts(meaning.parameter)?.type === 'list') return identifierList(words.flatMap((w) => w.split(/[\s,;]+/)).filter((w) => w !== ''));
    const index = meaning.vocabulary === 'rrc' && words.length === 1 ? byIndex(meaning.parameter, words[0]) : null;
    if (index !== null) return index;
    if (words.length === 1) return interpret(meaning.parameter, words[0], meaning.unit);
    const each = words.map((w) => interpret(meaning.parameter, w, meaning.unit));
    const bad = each.find((e) => !e.ok);
    return bad ?? { ok: true, value: each.map((e) => (e.ok ? e.value : null)) as number[] };
  }

  private miss({ steps, node, line }: Visit): void {
    if (node.kind === 'leaf') this.out.notUnderstood.push({ path: pathText(steps), line, raw: node.text.slice(0, 200) });
  }

  private noteDuplicates({ steps, node }: Visit): void {
    if (node.kind !== 'branch') return;
    const seen = new Map<string, number>();
    for (const { key, line, node: value } of node.entries) {
      const before = seen.get(key);
      // Repeated groups are XML's way to write a list; a repeated setting is not.
      if (before !== undefined && value.kind === 'leaf') {
        const path = pathText([...steps, step(key)]);
        this.out.problems.push({ code: 'duplicate-key', message: `Line ${line}: ${path} stands here again (first in line ${before}); the last one counts.`, line, path });
      }
      if (before === undefined) seen.set(key, line);
    }
  }
}

/** A dotted key is a path of its own. */
const stepsOf = (key: string): Step[] => (/^[\w-]+(?:\.[A-Za-z_][\w-]*)+$/.test(key) ? key.split('.').map((k) => step(k)) : [step(key)]);

const isDelay = (steps: readonly Step[]): boolean => /^(t[12a]|tcp)/.test(steps.at(-1)?.compact ?? '');

function directed(meaning: Meaning, steps: readonly Step[]): Meaning {
  const apart = parameterFacts(meaning.parameter)?.directional === true && isUplink(steps);
  return apart ? { ...meaning, parameter: uplinkName(meaning.parameter) } : meaning;
}

function atPlace(steps: readonly Step[], place: number): Step[] {
  const last = steps.at(-1);
  return last === undefined || last.place !== null ? [...steps, { key: '', compact: '', place }] : [...steps.slice(0, -1), { ...last, place }];
}

/** Keys of a glossary's `values` match as text or as number. */
function translate(text: string, values: ReadonlyMap<string, string> | null): string | null {
  if (values === null) return text;
  const exact = values.get(text.trim());
  if (exact !== undefined) return exact;
  for (const [word, meaning] of values) {
    const same = word.toLowerCase() === text.trim().toLowerCase() || (text.trim() !== '' && word !== '' && Number(word) === Number(text));
    if (same) return meaning;
  }
  return null;
}
