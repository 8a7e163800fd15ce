import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { Link, useSearchParams } from 'react-router-dom';
import { useMayFile, useMe } from '../app/me.js';
import { Loading } from '../components/ui/loading.js';
import { useTitle } from '../components/ui/title.js';
import { listLinks } from '../features/links/api/list-links.js';
import { readProgramme } from '../features/programmes/api/read-programme.js';
import { addressWith, changed, exportAddress, stateOf } from '../features/register/address.js';
import { countIssues } from '../features/register/api/count-issues.js';
import { listIssues, type RegisterState } from '../features/register/api/list-issues.js';
import { columnsText, visibilityOf, type Sort } from '../features/register/columns.js';
import { KeptViews } from '../features/register/kept-views.js';
import { NothingHere } from '../features/register/nothing-here.js';
import { Paging } from '../features/register/paging.js';
import { RegisterTable } from '../features/register/register-table.js';
import { Sentence } from '../features/register/sentence.js';
import { ColumnChoice, KeepView } from '../features/register/tools.js';

/** The register's state, and the ways to change it; both live in the address alone. */
function useRegisterAddress() {
  const [search, setSearch] = useSearchParams();
  const { programme } = useMe();
  const columns = search.get('columns');
  const state: RegisterState = { ...(programme ? { programme: programme.code } : {}), ...stateOf(search) };
  const write = (to: RegisterState, shown: string | null): void => {
    const { programme: code, ...rest } = to;
    setSearch(new URLSearchParams(addressWith({ ...rest, ...(code && code !== programme?.code ? { programme: code } : {}) }, shown)), { preventScrollReset: true });
  };
  return {
    state, search: search.toString(), visible: visibilityOf(columns),
    change: (to: Partial<RegisterState>) => write(changed(state, to), columns),
    show: (visible: Record<string, boolean>) => write(state, columnsText(visible)),
    sortBy: (sort: Sort) => write(changed(state, { sort, order: state.sort === sort && state.order === 'asc' ? 'desc' : 'asc' }), columns),
  };
}

/** The table of all issues that the reader may see. */
export function RegisterPage() {
  const { state, search, visible, change, show, sortBy } = useRegisterAddress();
  const { programme } = useMe();
  const mayFile = useMayFile(programme?.code);
  const { data, error, isPlaceholderData } = useQuery({ ...listIssues(state), placeholderData: keepPreviousData });
  const { data: counts } = useQuery(countIssues(state));
  const { data: links } = useQuery(listLinks(programme?.code));
  const { data: parties } = useQuery({ ...readProgramme(programme?.code ?? ''), enabled: programme !== null });
  useTitle('Register');
  if (error && !data) throw error;
  return (
    <main id="main" className="page register-page" tabIndex={-1}>
      <div className="register-bar">
        <h1>Register</h1>
        <Sentence state={state} change={change} links={links?.items ?? []} parties={parties?.parties ?? []} />
        <div className="register-tools">
          <span role="status">{counts ? `${counts.matching} of ${counts.all}` : ''}</span>
          <ColumnChoice visible={visible} change={show} />
          <KeepView query={search} />
          <a className="text-button" href={exportAddress(state)} download>Export CSV</a>
          {mayFile && <Link className="button button-main" to="/issues/new">File an issue</Link>}
        </div>
      </div>
      <KeptViews query={search} />
      {!data && <Loading what="Reading the register" />}
      {data && data.items.length > 0 && <RegisterTable rows={data.items} state={state} visible={visible} sortBy={sortBy} stale={isPlaceholderData} />}
      {data?.items.length === 0 && <NothingHere counts={counts} />}
      {data && <Paging of={data} total={counts?.matching} go={(page) => change({ page })} />}
    </main>
  );
}
