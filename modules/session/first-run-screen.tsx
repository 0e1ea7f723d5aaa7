import { useState } from 'react'
import { Controller, useForm, type Path } from 'react-hook-form'
import { useTranslation } from 'react-i18next'
import { View } from 'react-native'
import type { z } from 'zod'
import { setUpOrganisationBody } from '@/shared/contracts/session'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useFormResolver } from '../api/use-form-resolver'
import { Button } from '../ui/button'
import { Stack } from '../ui/card'
import { Field, type FieldProps } from '../ui/field'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'
import { useSessionGate } from './session-context'

type Values = z.input<typeof setUpOrganisationBody>

const nothingTyped: Values = { organisationName: '', phone: '', name: '', email: '', password: '' }

/** The first page of an empty product: makes the company and its first administrator, and signs in. */
export function FirstRunScreen() {
  const { t } = useTranslation()
  const { setUp } = useSessionGate()
  const showProblem = useShowProblem('session')
  const [problem, setProblem] = useState<ShownProblem>()
  const form = useForm({
    defaultValues: nothingTyped,
    resolver: useFormResolver(setUpOrganisationBody, 'session'),
  })
  const { isSubmitting } = form.formState

  const submit = form.handleSubmit(async (body) => {
    setProblem(undefined)
    try {
      await setUp(body)
    } catch (error) {
      setProblem(showProblem(error, { setError: form.setError }))
    }
  })
  const field = (name: Path<Values>, more: Partial<FieldProps> = {}) => (
    <Controller
      control={form.control}
      name={name}
      render={({ field: control, fieldState }) => (
        <Field
          {...control}
          {...more}
          label={t(`session.firstRun.${name}`)}
          error={fieldState.error?.message}
        />
      )}
    />
  )

  return (
    <View style={{ flex: 1, alignItems: 'center' }}>
      <Screen title={t('session.firstRun.title')} width="narrow">
        <Text>{t('session.firstRun.intro')}</Text>
        {problem !== undefined && (
          <Notice kind="stop" title={problem.title}>
            {problem.detail}
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
            {field('organisationName', { autoComplete: 'organization' })}
            {field('phone', { type: 'tel', inputMode: 'tel', autoComplete: 'tel' })}
            {field('name', { autoComplete: 'name' })}
            {field('email', { type: 'email', inputMode: 'email', autoComplete: 'username' })}
            {field('password', {
              type: 'password',
              autoComplete: 'new-password',
              hint: t('session.firstRun.passwordHint'),
            })}
            <Button
              kind="primary"
              isLarge
              isWide
              busy={isSubmitting}
              label={t('session.firstRun.submit')}
              onPress={() => void submit()}
            />
          </Stack>
        </form>
      </Screen>
    </View>
  )
}
