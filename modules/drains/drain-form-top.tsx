import { useEffect, useRef, useState } from 'react'
import { useRouter } from 'expo-router'
import { Pressable, View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { useUnsentCount } from '../offline/queue-provider'
import { Button } from '../ui/button'
import { Dialog } from '../ui/dialog'
import { Icon } from '../ui/icon'
import { LinkText } from '../ui/link-text'
import { fonts, gap, radius, target } from '../ui/measures'
import { Text } from '../ui/text'
import { useColours } from '../ui/theme'

/** Back, title, what is still on the phone, and Spill: 56 px. */
export function DrainFormTop({ title }: { title: string }) {
  const { t } = useTranslation()
  const colours = useColours()
  const router = useRouter()
  const unsent = useUnsentCount()
  const heading = useRef<HTMLHeadingElement>(null)
  const [isSpillOpen, setSpillOpen] = useState(false)

  useEffect(() => {
    document.title = t('ui.title', { page: title })
    heading.current?.focus({ preventScroll: true })
  }, [title, t])

  return (
    <View
      style={{ height: target.yard, flexDirection: 'row', alignItems: 'center', gap: gap.small }}
    >
      <View>
        <Button
          kind="quiet"
          icon="back"
          isIconOnly
          label={t('drains.form.back')}
          onPress={() => (router.canGoBack() ? router.back() : router.replace('/drains'))}
        />
      </View>
      <h1
        ref={heading}
        tabIndex={-1}
        style={{
          flex: 1,
          minWidth: 0,
          margin: 0,
          overflow: 'hidden',
          textOverflow: 'ellipsis',
          whiteSpace: 'nowrap',
          fontFamily: fonts.heading,
          fontWeight: 600,
          fontSize: 22,
          color: colours.ink,
        }}
      >
        {title}
      </h1>
      {unsent > 0 && (
        <LinkText href="/drains/unsent">{t('drains.form.onPhone', { count: unsent })}</LinkText>
      )}
      <Pressable
        role="button"
        aria-haspopup="dialog"
        onPress={() => setSpillOpen(true)}
        style={{
          minWidth: target.primary,
          height: target.yard,
          paddingHorizontal: gap.small,
          alignItems: 'center',
          justifyContent: 'center',
          borderRadius: radius,
          borderWidth: 1,
          borderLeftWidth: 6,
          borderColor: colours.stop.edge,
          backgroundColor: colours.sheet,
        }}
      >
        <Icon name="warning" size={20} colour={colours.stop.text} />
        <Text kind="label" colour={colours.stop.text}>
          {t('drains.form.spill')}
        </Text>
      </Pressable>
      <Dialog
        title={t('drains.form.spillTitle')}
        isOpen={isSpillOpen}
        onClose={() => setSpillOpen(false)}
        actions={<Button label={t('ui.close')} onPress={() => setSpillOpen(false)} />}
      >
        <Text>{t('drains.form.spillText')}</Text>
      </Dialog>
    </View>
  )
}
