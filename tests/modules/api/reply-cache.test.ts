import { ReplyCache } from '@/modules/api/reply-cache'

test('a cache opens with the replies that were kept, and takes new ones', () => {
  const cache = new ReplyCache('person', new Map([['yard', { data: 'as of 08:12' }]]))
  expect(cache.get('yard')).toEqual({ data: 'as of 08:12' })
  cache.set('drains', { data: [] })
  expect([...cache.keys()]).toEqual(['yard', 'drains'])
  cache.close()
})
