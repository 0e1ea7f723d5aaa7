import { useState } from 'react'
import { Redirect, type Href } from 'expo-router'
import { Controller, useForm } from 'react-hook-form'
import { useTranslation } from 'react-i18next'
import { View } from 'react-native'
import { readStatus, signInBody } from '@/shared/contracts/session'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useContract } from '../api/use-contract'
import { useFormResolver } from '../api/use-form-resolver'
import { Button } from '../ui/button'
import { Card, Stack } from '../ui/card'
import { Field } from '../ui/field'
import { Heading } from '../ui/heading'
import { fonts } from '../ui/measures'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'
import { homeOf } from './app-shell'
import { FirstRunScreen } from './first-run-screen'
import { useSessionGate } from './session-context'

const nothingTyped = { email: '', password: '' }

/** E-mail and password; in the demo also its people, each one tap away. An empty product asks to be set up. */
export function SignInScreen({ next }: { next: string | undefined }) {
  const { t } = useTranslation()
  const { state, signIn } = useSessionGate()
  const status = useContract(readStatus, {})
  const showProblem = useShowProblem('session')
  const [problem, setProblem] = useState<ShownProblem>()
  const form = useForm({
    defaultValues: nothingTyped,
    resolver: useFormResolver(signInBody, 'session'),
  })
  const { isSubmitting } = form.formState

  if (state.status === 'signed-in')
    return <Redirect href={placeAfter(next, homeOf(state.person.role))} />
  if (status.data?.isSetUp === false) return <FirstRunScreen />

  const submit = form.handleSubmit(async (body) => {
    setProblem(undefined)
    try {
      await signIn(body)
    } catch (error) {
      setProblem(showProblem(error, { setError: form.setError }))
    }
  })
  const signInAs = (email: string, password: string) => {
    form.reset({ email, password })
    void submit()
  }
  const demo = status.data?.demo

  return (
    <View style={{ flex: 1, alignItems: 'center' }}>
      <Screen
        title={t('session.signIn.title')}
        width="narrow"
        before={
          <View>
            <Text kind="strong" style={{ fontFamily: fonts.heading, fontSize: 40, lineHeight: 52 }}>
              {t('session.product')}
            </Text>
            <Text>{t('session.tagline')}</Text>
          </View>
        }
      >
        {state.hasEnded && problem === undefined && (
          <Notice kind="note" title={t('session.signIn.ended')} />
        )}
        {problem !== undefined && (
          <Notice kind="stop" title={problem.title}>
            {problem.code === 'offline' ? t('session.signIn.serverDown') : problem.detail}
          </Notice>
        )}
        <form
          noValidate
          onSubmit={(event) => {
            event.preventDefault()
            void submit()
          }}
        >
          <Stack>
            <Controller
              control={form.control}
              name="email"
              render={({ field, fieldState }) => (
                <Field
                  {...field}
                  label={t('session.signIn.email')}
                  type="email"
                  inputMode="email"
                  autoComplete="username"
                  error={fieldState.error?.message}
                />
              )}
            />
            <Controller
              control={form.control}
              name="password"
              render={({ field, fieldState }) => (
                <Field
                  {...field}
                  label={t('session.signIn.password')}
                  type="password"
                  autoComplete="current-password"
                  error={fieldState.error?.message}
                  onSubmit={() => void submit()}
                />
              )}
            />
            <Button
              kind="primary"
              isLarge
              isWide
              busy={isSubmitting}
              label={isSubmitting ? t('session.signIn.submitting') : t('session.signIn.submit')}
              onPress={() => void submit()}
            />
            <Text kind="hint">{t('session.signIn.forgotten')}</Text>
          </Stack>
        </form>
        {demo && (
          <Card role="region" label={t('session.signIn.demoTitle')}>
            <Heading level={2}>{t('session.signIn.demoTitle')}</Heading>
            <Text>{t('session.signIn.demoIntro')}</Text>
            {demo.people.map((person) => (
              <View key={person.email} style={{ gap: 4 }}>
                <Button
                  isWide
                  icon="person"
                  label={t('session.signIn.demoFill', { name: person.name })}
                  hint={t(`session.roles.${person.role}`)}
                  disabled={isSubmitting}
                  onPress={() => signInAs(person.email, demo.password)}
                />
                <Text kind="hint">
                  {[t(`session.roles.${person.role}`), person.does].filter(Boolean).join(': ')}
                </Text>
              </View>
            ))}
          </Card>
        )}
      </Screen>
    </View>
  )
}

/** Only a path of this app: an address from outside would be an open door. */
function placeAfter(next: string | undefined, home: Href): Href {
  return next !== undefined && /^\/(?!\/)[\w\-/]*$/.test(next) ? (next as Href) : home
}
