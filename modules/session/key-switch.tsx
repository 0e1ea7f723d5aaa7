import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { Button } from '../ui/button'
import { Stack } from '../ui/card'
import { Heading } from '../ui/heading'
import { Text } from '../ui/text'
import { areKeysOn, switchKeys } from './app-keys'

/** The single keys and their switch: speech input must be able to live without them (WCAG 2.1.4). */
export function KeySwitch() {
  const { t } = useTranslation()
  const [isOn, setOn] = useState(areKeysOn)
  const keys = [
    ['N', t('session.keys.newDrain')],
    ['/', t('session.keys.search')],
    ['?', t('session.keys.list')],
  ] as const
  return (
    <Stack space={4}>
      <Heading level={3}>{t('session.keys.title')}</Heading>
      {keys.map(([key, words]) => (
        <Text key={key}>
          <Text kind="code">{key}</Text>
          {`  ${words}`}
        </Text>
      ))}
      <Text kind="hint">{t('session.keys.explain')}</Text>
      <Text live="polite">{isOn ? t('session.keys.on') : t('session.keys.off')}</Text>
      <Button
        label={isOn ? t('session.keys.switchOff') : t('session.keys.switchOn')}
        onPress={() => {
          switchKeys(!isOn)
          setOn(!isOn)
        }}
      />
    </Stack>
  )
}
