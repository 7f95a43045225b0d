import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import { registerWriteActions } from '../../../../shared/permissions';
import { staleAfterWords, type RegisterItem, type RegisterList, type RegisterName } from '../../../../shared/schemas/registers';
import { Button, ButtonLink } from '../../../components/button';
import { EmptyState } from '../../../components/empty-state';
import { CheckInput, SearchInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { Page } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { errorText } from '../../../lib/form-errors';
import { useCan } from '../../../lib/session';
import { registerChoicesQuery, registerListQuery, type ListWish } from '../api';
import { CheckedText } from '../components/checked-text';
import { entryFacts } from '../model/entry-facts';
import type { WaterItem } from '../model/place';
import { registerWords } from '../model/register-words';

const SEARCH_DELAY_MS = 200;
const noWaters: WaterItem[] = [];

function useWish(): [ListWish, (patch: Partial<ListWish>) => void] {
  const [params, setParams] = useSearchParams();
  const wish: ListWish = { search: params.get('q') ?? '', stale: params.get('stale') === '1', archived: params.get('archived') === '1', page: Number(params.get('page')) || 1 };
  const change = (patch: Partial<ListWish>) => {
    const { search, stale, archived, page } = { ...wish, page: 1, ...patch };
    setParams({ ...(search ? { q: search } : {}), ...(stale ? { stale: '1' } : {}), ...(archived ? { archived: '1' } : {}), ...(page > 1 ? { page: String(page) } : {}) }, { replace: true });
  };
  return [wish, change];
}

/** One register as a ruled list. */
export function RegisterListPage({ register }: { register: RegisterName }) {
  const words = registerWords[register];
  const canAdd = useCan(registerWriteActions[register]);
  const [wish, change] = useWish();
  const { data: list, error } = useQuery(registerListQuery(register, wish));
  const add = canAdd && <ButtonLink kind="primary" icon="add" to={`/${register}/new`}>{words.add}</ButtonLink>;
  return (
    <Page title={words.title} below={words.about} actions={add}>
      <ListTools register={register} wish={wish} change={change} list={list} />
      {error && <Notice tone="bad" className="mt-4" title={`The ${words.title.toLowerCase()} could not be read`}>{errorText(error)}</Notice>}
      {!list && !error && <Loading what={words.title.toLowerCase()} />}
      {list && <Entries register={register} list={list} wish={wish} change={change} canAdd={canAdd} />}
    </Page>
  );
}

type ToolsProps = { register: RegisterName; wish: ListWish; change: (patch: Partial<ListWish>) => void; list: RegisterList | undefined };

function ListTools({ register, wish, change, list }: ToolsProps) {
  const [typed, setTyped] = useState(wish.search);
  useEffect(() => {
    if (typed === wish.search) return;
    const timer = setTimeout(() => change({ search: typed }), SEARCH_DELAY_MS);
    return () => clearTimeout(timer);
  }, [typed, wish.search, change]);
  return (
    <search className="no-print flex flex-wrap items-center gap-x-6 gap-y-1 border-b border-edge py-3">
      <SearchInput label={register === 'substances' ? 'Search by name, other names, CAS number' : 'Search by code, name, owner'} value={typed} onChange={setTyped} className="min-w-0 flex-1 basis-64" />
      <CheckInput label={`Not checked within ${staleAfterWords(register)}${list ? ` (${list.staleCount})` : ''}`} checked={wish.stale} onChange={(event) => change({ stale: event.target.checked })} />
      <CheckInput label="With archived ones" checked={wish.archived} onChange={(event) => change({ archived: event.target.checked })} />
    </search>
  );
}

type EntriesProps = { register: RegisterName; list: RegisterList; wish: ListWish; change: (patch: Partial<ListWish>) => void; canAdd: boolean };

function Entries({ register, list, wish, change, canAdd }: EntriesProps) {
  const words = registerWords[register];
  const { data: waters = noWaters } = useQuery({ ...registerChoicesQuery('waters'), enabled: register !== 'waters' && register !== 'substances' });
  if (list.total === 0 && (wish.search !== '' || wish.stale))
    return (
      <EmptyState title={wish.search === '' ? 'Everything here has been checked in time' : `Nothing found for "${wish.search}"`} action={<Button onClick={() => change({ search: '', stale: false })}>Show all {words.title.toLowerCase()}</Button>}>
        {wish.search !== '' && 'Every word typed must stand in the code, the name, the owner, another name or the CAS number.'}
      </EmptyState>
    );
  if (list.total === 0) return <EmptyState title={words.emptyTitle} action={canAdd && <ButtonLink kind="primary" icon="add" to={`/${register}/new`}>{words.add}</ButtonLink>}>{words.emptyText}</EmptyState>;
  return (
    <>
      <RuledList label={words.title}>
        {list.items.map((item) => <EntryRow key={item.id} item={item} waters={waters} />)}
      </RuledList>
      <Pages list={list} onPage={(page) => change({ page })} />
    </>
  );
}

function EntryRow({ item, waters }: { item: RegisterItem; waters: readonly WaterItem[] }) {
  return (
    <RuledRow to={`/${item.register}/${item.id}`} openLabel={`${item.code} ${item.name}`} lead={<span className="font-semibold text-ink">{item.code}</span>} trail={<span className="sm:w-66 sm:text-right"><CheckedText item={item} /></span>}>
      <div className="grid gap-x-6 lg:grid-cols-[minmax(12rem,1fr)_minmax(0,2fr)]">
        <span>
          <span className="font-semibold">{item.name}</span>
          {item.ownerName && <span className="block text-note text-ink2">{item.ownerName}</span>}
        </span>
        <span className="text-ink2">{entryFacts(item, waters)}</span>
      </div>
    </RuledRow>
  );
}

function Pages({ list, onPage }: { list: RegisterList; onPage: (page: number) => void }) {
  const pages = Math.max(1, Math.ceil(list.total / list.pageSize));
  const first = (list.page - 1) * list.pageSize + 1;
  const last = Math.min(list.total, list.page * list.pageSize);
  if (pages === 1) return <p className="pt-3 text-note text-ink2">{list.total === 1 ? '1 entry' : `${list.total} entries`}</p>;
  return (
    <nav aria-label="Pages" className="no-print flex flex-wrap items-center gap-3 pt-4">
      <Button icon="left" disabled={list.page === 1} onClick={() => onPage(list.page - 1)}>Previous</Button>
      <Button disabled={list.page >= pages} onClick={() => onPage(list.page + 1)}>Next<span className="sr-only"> page</span></Button>
      <span className="text-ink2">{`${first} to ${last} of ${list.total}`}</span>
    </nav>
  );
}
