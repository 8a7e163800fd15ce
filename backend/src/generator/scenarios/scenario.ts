import type { Side } from '#shared/vocabulary';
import type { NamedBytes } from '../recording.js';
import type { Declared } from '../snapshots/declared.js';
import { sayable, writeSnapshot, type SnapshotFile, type SnapshotStyle } from '../snapshots/snapshot.js';
import { captureFiles, type CaptureSpec } from './capture.js';
import type { Expectation } from './expectation.js';

/** One side's configuration: what it states, and in which words. */
export interface SideSpec {
  readonly declared: Declared;
  readonly style: SnapshotStyle;
}

/** Everything about one scenario, before anything is rendered. */
export interface ScenarioSpec {
  readonly id: string;
  readonly about: string;
  readonly group: string;
  /** Null: snapshots alone. */
  readonly capture: CaptureSpec | null;
  readonly sideA: SideSpec | null;
  readonly sideB: SideSpec | null;
  readonly transmitter: Side | null;
  readonly expect: Expectation;
}

export interface ScenarioSide extends SnapshotFile {
  /** What the file says, by the common names. */
  readonly declared: Declared;
}

export interface Scenario {
  readonly spec: ScenarioSpec;
  readonly capture: { readonly files: readonly NamedBytes[]; readonly options: readonly string[] } | null;
  readonly sideA: ScenarioSide | null;
  readonly sideB: ScenarioSide | null;
}

/** Renders the capture and writes the snapshots. Same spec, same bytes. */
export function makeScenario(spec: ScenarioSpec): Scenario {
  return {
    spec,
    capture: spec.capture && captureFiles(spec.capture),
    sideA: side(spec.sideA),
    sideB: side(spec.sideB),
  };
}

function side(spec: SideSpec | null): ScenarioSide | null {
  if (!spec) return null;
  return { ...writeSnapshot(spec.declared, spec.style), declared: sayable(spec.declared, spec.style) };
}

/** All files of a scenario by name, as they may be written into one folder. */
export function scenarioFiles(scenario: Scenario): NamedBytes[] {
  const text = (name: string, content: string): NamedBytes => ({ name, bytes: new TextEncoder().encode(content) });
  const sides = ([['a', scenario.sideA], ['b', scenario.sideB]] as const).flatMap(([letter, s]) => (s === null ? [] : [
    text(`side-${letter}.${s.ending}`, s.text),
    ...(s.glossary ? [text(`glossary-${letter}.${s.glossary.ending}`, s.glossary.text)] : []),
  ]));
  return [...(scenario.capture?.files ?? []), ...sides];
}

/** Arguments of the decode command, file names relative to the scenario's folder. */
export function scenarioArguments(scenario: Scenario): string[] {
  const sides = ([['a', scenario.sideA], ['b', scenario.sideB]] as const).flatMap(([letter, s]) => (s === null ? [] : [
    `--side-${letter}`, `side-${letter}.${s.ending}`,
    ...(s.glossary ? [`--glossary-${letter}`, `glossary-${letter}.${s.glossary.ending}`] : []),
  ]));
  const { capture, spec } = scenario;
  return [
    ...(capture ? ['--capture', capture.files[0].name, ...capture.options] : []),
    ...sides,
    ...(spec.transmitter ? ['--transmitter', spec.transmitter] : []),
  ];
}

/** The scenario as a case record: arguments and what should be found. */
export function caseRecord(scenario: Scenario): Record<string, unknown> {
  const { id, about, group, expect } = scenario.spec;
  return { id, about, group, kind: 'decode', args: scenarioArguments(scenario), files: scenarioFiles(scenario).map((f) => f.name), expect };
}
