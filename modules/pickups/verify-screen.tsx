import { useTranslation } from 'react-i18next'
import { View } from 'react-native'
import { verifyDocument } from '@/shared/contracts/pickups'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { Card } from '../ui/card'
import { FactList } from '../ui/fact-list'
import { Loading } from '../ui/loading'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'

/** Anyone with the paper in hand: does its code belong to a document of the book? No sign-in. */
export function VerifyScreen({ hash }: { hash: string }) {
  const { t } = useTranslation()
  const reply = useContract(verifyDocument, { params: { hash } })
  const { data } = reply
  return (
    <View style={{ flex: 1, alignItems: 'center' }}>
      <Screen title={t('pickups.verify.title')} width="narrow">
        {data === undefined &&
          (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
        {data?.matches === false && (
          <Notice kind="stop" title={t('pickups.verify.unknown')}>
            {t('pickups.verify.unknownText')}
          </Notice>
        )}
        {data?.matches === true && (
          <>
            <Notice
              kind={data.isNewest === true && data.stage !== 'voided' ? 'settled' : 'check'}
              title={t(data.isNewest === true ? 'pickups.verify.known' : 'pickups.verify.older')}
            />
            <Card>
              <FactList
                facts={[
                  { name: t('pickups.verify.number'), value: data.number ?? '–' },
                  { name: t('pickups.verify.organisation'), value: data.organisation ?? '–' },
                  {
                    name: t('pickups.verify.paper'),
                    value:
                      data.kind === null
                        ? '–'
                        : t(`pickups.papers.${data.kind}`, { revision: data.revision }),
                  },
                  {
                    name: t('pickups.verify.stage'),
                    value: data.stage === null ? '–' : t(`pickups.stages.${data.stage}`),
                  },
                  { name: t('pickups.verify.made'), value: data.madeAt ?? '–' },
                ]}
              />
            </Card>
          </>
        )}
        <Text kind="hint">{t('pickups.verify.hint')}</Text>
      </Screen>
    </View>
  )
}
