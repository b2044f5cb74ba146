import { z } from 'zod'
import { addPerson, changePerson, removePerson, renewLink } from '../commands/savePeople.js'
import { nothing, uid } from '../contract/common.js'
import { PATHS } from '../contract/paths.js'
import {
  peopleOutput,
  person,
  personChangeInput,
  personInput,
  personLinkOutput,
} from '../contract/people.js'
import { notFound } from '../errors.js'
import { assignmentsSeen } from '../policies/assignments.js'
import type { Scope } from '../policies/index.js'
import { presentPerson } from '../presenters/person.js'
import { findPerson, peopleOfNetwork } from '../queries/peopleOfNetwork.js'
import type { Member } from '../queries/peopleOfNetwork.js'
import { studiosOfNetwork } from '../queries/studiosOfNetwork.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'

const params = z.object({ person: uid })

const seen = (scope: Scope, { held }: Member) => assignmentsSeen(scope, held).length > 0

/** Somebody of whom this person sees no role is not there. */
async function load({ params, scope }: { params: { person: string }; scope: Scope }) {
  const member = await findPerson(scope, { uid: params.person })
  if (!member || !seen(scope, member)) throw notFound()
  return member
}

async function present(members: readonly Member[], scope: Scope) {
  const studios = await studiosOfNetwork(scope, scope.studioIds)
  const byId = new Map(studios.map((studio) => [studio.id, studio]))
  return members.map((member) => presentPerson(member, byId, scope))
}

async function presentOne(member: Member, scope: Scope) {
  const [view] = await present([member], scope)
  if (!view) throw new Error('A person was not presented')
  return view
}

/** Members and their roles. Owners see the people of their own studios. */
export const peopleRoutes: readonly Route[] = [
  defineRoute({
    method: 'get',
    path: PATHS.people,
    ability: 'people.read',
    output: peopleOutput,
    handle: async ({ scope }) => {
      const members = await peopleOfNetwork(scope)
      return {
        rows: await present(
          members.filter((member) => seen(scope, member)),
          scope,
        ),
      }
    },
  }),
  defineRoute({
    method: 'post',
    path: PATHS.people,
    ability: 'people.edit',
    body: personInput,
    status: 201,
    output: personLinkOutput,
    handle: async ({ scope, body, deps }) => {
      const { member, link } = await addPerson(scope, body, deps)
      return { person: await presentOne(member, scope), link }
    },
  }),
  defineRoute({
    method: 'patch',
    path: PATHS.person,
    ability: 'people.edit',
    params,
    body: personChangeInput,
    load,
    output: person,
    handle: async ({ scope, loaded, body, deps }) =>
      presentOne(await changePerson(scope, loaded.user.uid, body.assignments, deps), scope),
  }),
  defineRoute({
    method: 'delete',
    path: PATHS.person,
    ability: 'people.edit',
    params,
    load,
    output: nothing,
    handle: async ({ scope, loaded, deps }) => {
      await removePerson(scope, loaded.user.uid, deps)
      return {}
    },
  }),
  defineRoute({
    method: 'post',
    path: PATHS.personLink,
    ability: 'people.edit',
    params,
    load,
    output: personLinkOutput,
    handle: async ({ scope, loaded, deps }) => {
      const { member, link } = await renewLink(scope, loaded.user.uid, deps)
      return { person: await presentOne(member, scope), link }
    },
  }),
]
