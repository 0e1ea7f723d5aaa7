import type { Response } from 'supertest'
import { allContracts } from '@/shared/contracts/all-contracts'
import { can, roles, type Role } from '@/shared/policies'
import { aSite, anOrganisation, signInAs, type Member } from '../helpers/factories'
import {
  send,
  type AskedRequest,
  type AskedWorld,
  type RequestTable,
} from '../helpers/requests/asked-request'
import { anAskedWorld } from '../helpers/requests/asked-world'
import { setUpRequests } from '../helpers/requests/set-up-requests'
import { workRequests } from '../helpers/requests/work-requests'
import { testApp, type TestApp } from '../helpers/test-app'

/** Every endpoint, asked by every role, by nobody, by people of another site and by people of another organisation. */
const table: RequestTable = { ...setUpRequests, ...workRequests }
const guarded = allContracts.filter(({ access }) => access !== 'public')

let product: TestApp
let world: AskedWorld
/** The same roles at another site of the organisation. */
let elsewhere: Record<Role, Member>
/** The same roles in another organisation. */
let strangers: Record<Role, Member>

beforeAll(async () => {
  product = await testApp()
  world = await anAskedWorld(product)
  const { organisation } = world.site
  const otherSite = await aSite(product, { organisation })
  const inRoles = async (of: typeof organisation, siteId: string) => ({
    technician: await signInAs(product, of, 'technician', [siteId]),
    officer: await signInAs(product, of, 'officer', [siteId]),
    auditor: await signInAs(product, of, 'auditor'),
    administrator: of.administrator,
  })
  elsewhere = await inRoles(organisation, otherSite.id)
  const foreign = await anOrganisation(product)
  strangers = await inRoles(foreign, (await aSite(product, { organisation: foreign })).id)
})
afterAll(() => product.close())

function memberAs(role: Role): Member {
  return world[role]
}

test('every endpoint that is not for everybody is asked here', () => {
  expect(guarded.map(({ name }) => name).sort()).toEqual(Object.keys(table).sort())
})

test('what is open to everybody is these and no more', () => {
  const open = allContracts.filter(({ access }) => access === 'public').map(({ name }) => name)
  expect(open.sort()).toEqual([
    'readDocument',
    'readHealth',
    'readStatus',
    'refreshSession',
    'setUpOrganisation',
    'signIn',
    'signOut',
    'verifyDocument',
  ])
})

describe.each(guarded.map((contract) => [contract.name, contract] as const))(
  '%s',
  (name, contract) => {
    const { access, status } = contract
    const entry = table[name]
    const make = async (): Promise<AskedRequest> => (await entry?.make(world)) ?? {}
    const allows = (role: Role) => access !== 'public' && can({ role, siteIds: [] }, access)

    test('is refused to nobody, to roles that do not do it, and is done for those that do', async () => {
      const asked = await make()
      expect(codeOf(await send(product, contract, asked, null))).toBe('401 sign-in-required')
      const answers: string[] = []
      for (const role of roles.filter((role) => !allows(role))) {
        answers.push(codeOf(await send(product, contract, asked, memberAs(role).bearer())))
      }
      expect(answers.filter((answer) => answer !== '403 not-allowed')).toEqual([])
      for (const role of roles.filter(allows)) {
        const reply = await send(product, contract, await make(), memberAs(role).bearer())
        expect(`${role} ${codeOf(reply)}`).toBe(`${role} ${status}`)
      }
    })

    test('gives nothing of the organisation to another one', async () => {
      if (entry?.reach === 'own') return
      const asked = await make()
      for (const role of roles.filter(allows)) {
        const reply = await send(product, contract, asked, strangers[role].bearer())
        expectNothingOf(reply, asked, [world.site.id, world.site.organisation.id, world.hauler.id])
      }
    })

    test('gives nothing of a site to people of another one', async () => {
      if (entry?.reach !== 'site') return
      const asked = await make()
      for (const role of roles.filter(allows)) {
        if (role === 'auditor' || role === 'administrator') continue
        const reply = await send(product, contract, asked, elsewhere[role].bearer())
        expectNothingOf(reply, asked, [world.site.id])
      }
    })
  },
)

/** `403 not-allowed` of a problem, the status of anything else. */
function codeOf(reply: Response): string {
  const { code } = reply.body as { code?: unknown }
  return reply.status < 400 ? String(reply.status) : `${reply.status} ${String(code)}`
}

/** Refused as if it were not there; or a list, or a record of their own, that holds none of these. */
function expectNothingOf(reply: Response, asked: AskedRequest, ids: readonly string[]): void {
  if (reply.status >= 400) {
    const { code, fields } = reply.body as { code: string; fields?: { code: string }[] }
    const unknown = fields?.map((field) => field.code) ?? []
    expect([404, 400]).toContain(reply.status)
    if (reply.status === 400) expect([code, ...unknown]).toEqual(['fields-refused', 'unknown'])
    return
  }
  const given = reply.text ?? ''
  const named = [...ids, ...Object.values(asked.params ?? {})]
  expect(named.filter((id) => given.includes(id))).toEqual([])
  expect(asked.params).toBeUndefined()
}
