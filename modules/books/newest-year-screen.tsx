import { Redirect } from 'expo-router'
import { useTranslation } from 'react-i18next'
import { listYears } from '@/shared/contracts/books'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'

const nothing = { query: {} }

/** Books open on the newest year that has lines. */
export function NewestYearScreen() {
  const { t } = useTranslation()
  const reply = useContract(listYears, nothing)
  const newest = reply.data?.years[0]
  if (newest !== undefined) return <Redirect href={`/books/${newest}`} />
  return (
    <Screen title={t('books.title')}>
      {reply.data === undefined ? (
        reply.error === undefined ? (
          <Loading />
        ) : (
          <CouldNotLoad reply={reply} />
        )
      ) : (
        <EmptyState title={t('books.empty')} />
      )}
    </Screen>
  )
}
