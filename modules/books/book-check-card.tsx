import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { readBookCheck } from '@/shared/contracts/books'
import type { ReplyOf } from '@/shared/contracts/contract'
import { call } from '../api/call'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'
import { useAct } from './use-act'

/** Re-adds and re-hashes the whole book when asked, and says what did not hold. */
export function BookCheckCard() {
  const { t } = useTranslation()
  const act = useAct()
  const [found, setFound] = useState<ReplyOf<typeof readBookCheck>>()
  return (
    <Card role="region" label={t('books.check.title')}>
      <Heading level={2}>{t('books.check.title')}</Heading>
      <Text>{t('books.check.text')}</Text>
      {act.problem !== undefined && (
        <Notice kind="stop" title={act.problem.title}>
          {act.problem.detail}
        </Notice>
      )}
      {found !== undefined &&
        (found.findings.length === 0 ? (
          <Notice
            kind="settled"
            title={t('books.check.sound', { movements: found.movements, accounts: found.accounts })}
          />
        ) : (
          <Notice kind="stop" title={t('books.check.findings', { count: found.findings.length })}>
            <ul>
              {found.findings.slice(0, 50).map(({ code, detail }) => (
                <li key={`${code} ${detail}`}>
                  <Text>{`${code}: ${detail}`}</Text>
                </li>
              ))}
            </ul>
          </Notice>
        ))}
      <Button
        label={t('books.check.act')}
        busy={act.isBusy}
        onPress={() => act.run(async () => setFound(await call(readBookCheck, {})))}
      />
    </Card>
  )
}
