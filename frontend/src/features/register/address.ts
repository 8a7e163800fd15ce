import { registerQuery } from '#shared/api/issues';
import { searchOf } from '../../lib/call.js';
import type { RegisterState } from './api/list-issues.js';

/** The address bar holds the register's whole state, under the names of the API's query. */
const DEFAULTS: RegisterState = { standing: 'unsettled', move: 'anyone', sort: 'due', order: 'asc', page: 1, size: 50 };

/** Reads the state; a value that does not parse is left out rather than refused. */
export function stateOf(search: URLSearchParams): RegisterState {
  const state: Record<string, unknown> = {};
  for (const [name, schema] of Object.entries(registerQuery.shape)) {
    const text = search.get(name);
    if (text === null || text === '') continue;
    const read = schema.safeParse(text);
    if (read.success) state[name] = name === 'late' ? text : read.data;
  }
  return { ...DEFAULTS, ...state } as RegisterState;
}

/** The state as an address; what is as usual is not written. */
export function addressWith(state: RegisterState, columns: string | null): string {
  const unusual = Object.fromEntries(Object.entries(state).filter(([name, value]) => value !== DEFAULTS[name as keyof RegisterState]));
  return searchOf({ ...unusual, columns });
}

/** Any change but one of the page starts again at the first. */
export const changed = (state: RegisterState, change: Partial<RegisterState>): RegisterState =>
  ({ ...state, page: 1, ...change });

export const exportAddress = (state: RegisterState): string => {
  const { page: _page, size: _size, ...rest } = state;
  return `/api/issues/export${searchOf(rest)}`;
};
