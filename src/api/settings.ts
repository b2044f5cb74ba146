/** Settings of a network and its studios: lists, people, jobs. */
import { queryOptions } from '@tanstack/vue-query'
import type { z } from 'zod'
import {
  kiln,
  kilnsOutput,
  level,
  levelsOutput,
  studio,
  studiosOutput,
} from '../../server/contract/catalogue.js'
import type { kilnInput, levelInput, studioInput } from '../../server/contract/catalogue.js'
import { nothing } from '../../server/contract/common.js'
import { jobsOutput, runJobOutput } from '../../server/contract/jobs.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import { peopleOutput, person, personLinkOutput } from '../../server/contract/people.js'
import type { personChangeInput, personInput } from '../../server/contract/people.js'
import { getJson, sendJson } from './http'

export function studiosQuery(network: string) {
  return queryOptions({
    queryKey: ['settings', network, 'studios'],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.studios, { network }), { schema: studiosOutput, signal }),
  })
}
/** Makes a studio, or changes the one of that uid. */
export function saveStudio(network: string, uid: string | null, body: z.input<typeof studioInput>) {
  return uid
    ? sendJson(fill(PATHS.studio, { network, studio: uid }), {
        method: 'PATCH',
        body,
        schema: studio,
      })
    : sendJson(fill(PATHS.studios, { network }), { method: 'POST', body, schema: studio })
}

export function kilnsQuery(network: string) {
  return queryOptions({
    queryKey: ['settings', network, 'kilns'],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.kilns, { network }), { schema: kilnsOutput, signal }),
  })
}
/** Makes a kiln, or changes the one of that uid. */
export function saveKiln(network: string, uid: string | null, body: z.input<typeof kilnInput>) {
  return uid
    ? sendJson(fill(PATHS.kiln, { network, kiln: uid }), { method: 'PATCH', body, schema: kiln })
    : sendJson(fill(PATHS.kilns, { network }), { method: 'POST', body, schema: kiln })
}

/** Levels of some factors, archived ones too: the page folds them away. */
export function levelsQuery(network: string, factors: readonly string[]) {
  return queryOptions({
    queryKey: ['settings', network, 'levels', factors],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.levels, { network }), {
        schema: levelsOutput,
        query: { factor: factors.join(','), archived: 'true' },
        signal,
      }),
  })
}
/** Makes a level, or changes the one of that uid. */
export function saveLevel(network: string, uid: string | null, body: z.input<typeof levelInput>) {
  return uid
    ? sendJson(fill(PATHS.level, { network, level: uid }), { method: 'PATCH', body, schema: level })
    : sendJson(fill(PATHS.levels, { network }), { method: 'POST', body, schema: level })
}

export type Archivable = 'studio' | 'kiln' | 'level'
/** Archives a thing or brings it back; old firings keep it either way. */
export async function setArchived(
  network: string,
  what: Archivable,
  uid: string,
  archived: boolean,
): Promise<void> {
  const path = {
    studio: PATHS.studioArchived,
    kiln: PATHS.kilnArchived,
    level: PATHS.levelArchived,
  }
  await sendJson(fill(path[what], { network, [what]: uid }), { method: 'PUT', body: { archived } })
}

export function peopleQuery(network: string) {
  return queryOptions({
    queryKey: ['settings', network, 'people'],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.people, { network }), { schema: peopleOutput, signal }),
  })
}
export function addPerson(network: string, body: z.input<typeof personInput>) {
  return sendJson(fill(PATHS.people, { network }), {
    method: 'POST',
    body,
    schema: personLinkOutput,
  })
}
export function changePerson(
  network: string,
  uid: string,
  body: z.input<typeof personChangeInput>,
) {
  return sendJson(fill(PATHS.person, { network, person: uid }), {
    method: 'PATCH',
    body,
    schema: person,
  })
}
/** A new one-time link; older ones end. */
export function makePersonLink(network: string, uid: string) {
  return sendJson(fill(PATHS.personLink, { network, person: uid }), {
    method: 'POST',
    schema: personLinkOutput,
  })
}
/** Takes every role that the asker may take; what the person wrote stays. */
export async function removePerson(network: string, uid: string): Promise<void> {
  await sendJson(fill(PATHS.person, { network, person: uid }), {
    method: 'DELETE',
    schema: nothing,
  })
}

/** Jobs with their last runs; asked again every two seconds while one is under way. */
export function jobsQuery(network: string) {
  return queryOptions({
    queryKey: ['settings', network, 'jobs'],
    queryFn: ({ signal }) => getJson(fill(PATHS.jobs, { network }), { schema: jobsOutput, signal }),
    refetchInterval: (query) =>
      query.state.data?.runs.some(({ status }) => status === 'running' || status === 'waiting')
        ? 2000
        : false,
  })
}
export function runJob(network: string, job: string) {
  return sendJson(fill(PATHS.jobRuns, { network, job }), { method: 'POST', schema: runJobOutput })
}
