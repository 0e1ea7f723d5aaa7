import { acts, can, roles, type Act, type Role } from '@/shared/policies'

const person = (role: Role) => ({ role, siteIds: ['here'] })
const of = (role: Role) => acts.filter((act) => can(person(role), act))

test('an auditor reads everything and changes nothing but the own password', () => {
  const changes = of('auditor').filter((act) => !act.startsWith('read-'))
  expect(changes).toEqual(['change-own-password'])
  const unread = acts.filter((act) => act.startsWith('read-') && !of('auditor').includes(act))
  // The yard is a place to work in, the mailbox a desk of the demo.
  expect(unread).toEqual(['read-yard', 'read-mailbox'])
})

test('only an administrator changes set-up and people', () => {
  const acted = (act: Act) => roles.filter((role) => can(person(role), act))
  expect(acted('change-set-up')).toEqual(['administrator'])
  expect(acted('change-people')).toEqual(['administrator'])
  expect(acted('record-drain')).toEqual(['technician', 'officer', 'administrator'])
  expect(acted('issue-pickup')).toEqual(['officer', 'administrator'])
})

test('technicians and officers act at their own sites, auditors and administrators see all', () => {
  expect(roles.filter((role) => can(person(role), 'read-drains', { siteId: 'elsewhere' }))).toEqual(
    ['auditor', 'administrator'],
  )
  expect(roles.filter((role) => can(person(role), 'read-drains', { siteId: 'here' }))).toEqual([
    ...roles,
  ])
})
