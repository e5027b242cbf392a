import { peopleRoutes } from '#shared/contract/people';
import { type Mounted, mount } from '../../http/mount.js';
import type { People } from './people.js';

export function mountPeople(people: People): Mounted[] {
  return [
    mount(peopleRoutes.list, ({ person }) => people.list(person())),
    mount(peopleRoutes.invite, ({ person, body, actor }) => people.invite(person(), body, actor())),
    mount(peopleRoutes.change, ({ params, body, actor }) => people.change(params.personId, body, actor())),
  ];
}
