'use client';

import { useRef, useState } from 'react';
import { Button } from '@/components/ui/button';
import { SelectField, TextField } from '@/components/ui/field';
import type { BatchList } from '@/lib/schemas/batch-list';
import type { WireDto } from '@/lib/schemas/stock';
import { fullWireName } from '@/lib/wire/name';

/** Typing asks the server only after this rest. */
const SEARCH_REST_MS = 300;

/** What the button says of the order, as it is and turned round. */
const WAY_WORDS: Record<BatchList['sort'], [usual: string, turned: string]> = {
  due: ['Soonest first', 'Latest first'],
  priority: ['Highest first', 'Lowest first'],
  number: ['Oldest first', 'Newest first'],
  name: ['A to Z', 'Z to A'],
};

interface BatchFiltersProps {
  list: BatchList;
  wires: WireDto[];
  /** Called with what is to be shown from now on; page 1 of it. */
  onChange: (change: Partial<BatchList>) => void;
}

function Search({ search, onChange }: { search: string; onChange: BatchFiltersProps['onChange'] }) {
  const [text, setText] = useState(search);
  const [seen, setSeen] = useState(search);
  // A link that shows all again empties the field too; a word that is being typed is never touched.
  if (seen !== search) {
    setSeen(search);
    if (search === '') setText('');
  }
  const timer = useRef<ReturnType<typeof setTimeout>>(undefined);
  const type = (typed: string) => {
    setText(typed);
    clearTimeout(timer.current);
    timer.current = setTimeout(() => onChange({ search: typed.trim() }), SEARCH_REST_MS);
  };
  return (
    <TextField
      label="Search"
      type="search"
      placeholder="Name, number or label"
      value={text}
      maxLength={80}
      onChange={(event) => type(event.target.value)}
    />
  );
}

/** Search, filters and order of the list. Everything chosen stands in the URL. */
export function BatchFilters({ list, wires, onChange }: BatchFiltersProps) {
  return (
    <form
      role="search"
      onSubmit={(event) => event.preventDefault()}
      className="page grid items-end gap-4 border-b border-line bg-sheet py-4 grid-cols-2 lg:grid-cols-[2fr_1fr_2fr_1fr_1fr_9.5rem]"
    >
      <div className="max-lg:col-span-2">
        <Search search={list.search} onChange={onChange} />
      </div>
      <SelectField
        label="State"
        value={list.state}
        onChange={(event) => onChange({ state: event.target.value as BatchList['state'] })}
      >
        <option value="open">Open</option>
        <option value="all">All</option>
        <option value="draft">Drafts</option>
        <option value="queued">Queued</option>
        <option value="cutting">Cutting</option>
        <option value="done">Done</option>
        <option value="withdrawn">Withdrawn</option>
      </SelectField>
      <SelectField
        label="Wire"
        value={list.wire ?? ''}
        onChange={(event) => onChange({ wire: event.target.value || null })}
      >
        <option value="">Any wire</option>
        {wires.map((wire) => (
          <option key={wire.id} value={wire.id}>
            {fullWireName(wire)}
          </option>
        ))}
      </SelectField>
      <SelectField
        label="Due"
        value={list.due}
        onChange={(event) => onChange({ due: event.target.value as BatchList['due'] })}
      >
        <option value="any">Any time</option>
        <option value="overdue">Past its time</option>
        <option value="day">Within 24 hours</option>
        <option value="week">Within 7 days</option>
        <option value="none">No due time</option>
      </SelectField>
      <SelectField
        label="Order by"
        value={list.sort}
        onChange={(event) => onChange({ sort: event.target.value as BatchList['sort'] })}
      >
        <option value="due">Due time</option>
        <option value="priority">Priority</option>
        <option value="number">Number</option>
        <option value="name">Name</option>
      </SelectField>
      <Button className="whitespace-nowrap" onClick={() => onChange({ descending: !list.descending })}>
        {WAY_WORDS[list.sort][list.descending ? 1 : 0]}
      </Button>
    </form>
  );
}
