import type { Metadata } from 'next';
import { AddPerson } from '@/components/setup/people/add-person';
import { PersonRow } from '@/components/setup/people/person-row';
import { Rows, Sides } from '@/components/setup/sides';
import { PageHead } from '@/components/ui/page-head';
import { listPeople } from '@/lib/services/people/list-people';
import { guarded } from '../guarded';
import { addPerson, changeRoles, disablePerson, enablePerson, setPassword } from './actions';

export const metadata: Metadata = { title: 'People' };

export default function PeoplePage() {
  return guarded('people.write', async (ctx) => {
    const people = await listPeople({ ctx });
    const actions = { changeRoles, setPassword, disable: disablePerson, enable: enablePerson };
    return (
      <>
        <PageHead title="People">Who may do what. A person may hold several roles.</PageHead>
        <Sides
          list={
            <Rows label="People" none="">
              {people.map((person) => (
                <PersonRow key={person.id} person={person} actions={actions} />
              ))}
            </Rows>
          }
          form={<AddPerson action={addPerson} />}
        />
      </>
    );
  });
}
