import { useState, type ReactNode } from 'react'
import { useRouter, type Href } from 'expo-router'
import { useTranslation } from 'react-i18next'
import { useUnsentCount } from '../offline/queue-provider'
import { Button } from '../ui/button'
import { Stack } from '../ui/card'
import { ChoiceChips } from '../ui/choice'
import { Dialog } from '../ui/dialog'
import type { IconName } from '../ui/icon'
import { Text } from '../ui/text'
import { themeChoices, useTheme, type ThemeChoice } from '../ui/theme'
import { useWindowClass } from '../ui/use-window-class'
import { KeySwitch } from './key-switch'
import { useSession } from './use-session'

type Open = 'nothing' | 'menu' | 'help' | 'sign-out'

/** Behind the person's name: set-up, limits, mailbox, theme, help, sign-out; the same everywhere. */
export function PersonMenu({ help }: { help: ReactNode }) {
  const { t } = useTranslation()
  const { person, can, signOut } = useSession()
  const { choice, choose } = useTheme()
  const router = useRouter()
  const unsent = useUnsentCount()
  const isPhone = useWindowClass() === 'phone'
  const [open, setOpen] = useState<Open>('nothing')
  const close = () => setOpen('nothing')

  const go = (href: Href) => () => {
    close()
    router.push(href)
  }
  const places: { label: string; icon: IconName; href: Href; isThere: boolean }[] = [
    {
      label: t('session.personMenu.setUp'),
      icon: 'gear',
      href: '/setup',
      isThere: person.role === 'officer' || can('change-set-up'),
    },
    {
      label: t('session.personMenu.limits'),
      icon: 'flag',
      href: '/books/limits',
      isThere: can('read-books') && can('read-limits'),
    },
    {
      label: t('session.personMenu.mailbox'),
      icon: 'mail',
      href: '/mailbox',
      isThere: person.organisation.isDemo && can('read-mailbox'),
    },
  ]

  return (
    <>
      <Button
        kind="quiet"
        icon="person"
        label={t('session.personMenu.open', { name: person.name })}
        isIconOnly={isPhone}
        onPress={() => setOpen('menu')}
      />
      <Dialog
        title={person.name}
        isOpen={open === 'menu'}
        onClose={close}
        actions={<Button label={t('ui.close')} onPress={close} />}
      >
        <Stack>
          <Text kind="label">
            {[t(`session.roles.${person.role}`), person.organisation.name].join(', ')}
          </Text>
          {places
            .filter(({ isThere }) => isThere)
            .map(({ label, icon, href }) => (
              <Button key={label} isWide label={label} icon={icon} onPress={go(href)} />
            ))}
          <Button
            isWide
            label={t('session.personMenu.help')}
            icon="info"
            onPress={() => setOpen('help')}
          />
          <ChoiceChips
            label={t('session.themes.label')}
            value={choice}
            onChange={(value) => choose(value as ThemeChoice)}
            options={themeChoices.map((value) => ({ value, label: t(`session.themes.${value}`) }))}
          />
          <Button
            isWide
            label={t('session.signOut.action')}
            onPress={() => {
              if (unsent > 0) setOpen('sign-out')
              else void signOut()
            }}
          />
        </Stack>
      </Dialog>
      <Dialog
        title={t('session.personMenu.help')}
        isOpen={open === 'help'}
        onClose={close}
        actions={<Button label={t('ui.close')} onPress={close} />}
      >
        {help}
        <KeySwitch />
      </Dialog>
      <Dialog
        title={t('session.signOut.title')}
        isOpen={open === 'sign-out'}
        onClose={close}
        actions={
          <>
            <Button kind="primary" label={t('session.signOut.stay')} onPress={close} />
            <Button
              kind="danger"
              label={t('session.signOut.confirm')}
              onPress={() => void signOut()}
            />
          </>
        }
      >
        <Text>{t('session.signOut.warning', { count: unsent })}</Text>
      </Dialog>
    </>
  )
}
