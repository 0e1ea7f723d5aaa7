import { useEffect, useState } from 'react'
import { useTranslation } from 'react-i18next'
import type { Site } from '@/shared/contracts/set-up'
import { useQueuedRecords } from '../offline/queue-provider'
import { useSite } from '../session/site-provider'
import { useSession } from '../session/use-session'
import { Loading } from '../ui/loading'
import { LinkText } from '../ui/link-text'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'
import { bestContainer } from './best-container'
import { DrainForm, type DrainStart } from './drain-form'
import { preferredMethod, preferredUnit } from './drain-preferences'
import { emptyDrain, valuesOfFacts, type DrainMachine, type DrainValues } from './drain-values'
import { newId } from '../api/new-id'
import { readDrainDraft } from './use-drain-draft'
import { useDrainChoices, type DrainChoices } from './use-drain-choices'

type Asked = {
  /** Code or id, from a label or a link. */
  machine: string | undefined
  container: string | undefined
  /** A refused or waiting record of the queue, to be mended under its own id. */
  record: string | undefined
}

/** Opens the drain form: empty with what is known filled in, from a draft, or from a record that could not be sent. */
export function DrainFormScreen({ machine, container, record }: Asked) {
  const { t } = useTranslation()
  const { person, can } = useSession()
  const { site: siteNow, sites, isLoading: isSiteLoading } = useSite()
  const records = useQueuedRecords()
  const mended = records.find(({ id }) => id === record)
  const site = sites.find(({ id }) => id === mended?.body.siteId) ?? siteNow
  const { choices, isLoading } = useDrainChoices(site)
  const [start, setStart] = useState<DrainStart>()

  useEffect(() => {
    if (start !== undefined || site === undefined || choices === undefined) return
    if (record !== undefined && mended === undefined) return
    let isCurrent = true
    void (async () => {
      const fresh = freshStart(site, choices, person.id, { machine, container })
      const title = t('drains.form.title')
      const draft = mended === undefined ? await readDrainDraft(person.id, site.id) : undefined
      if (!isCurrent) return
      if (mended !== undefined) {
        const values = valuesOfFacts(mended.body, site.timeZone, site.massUnit)
        setStart({
          recordId: mended.id,
          values,
          isDraft: false,
          title: t('drains.form.fixTitle'),
        })
      } else if (draft !== undefined) {
        const values = { ...draft.values, ...fresh.asked }
        setStart({ recordId: draft.recordId, values, isDraft: true, title })
      } else {
        setStart({ recordId: newId(), values: fresh.values, isDraft: false, title })
      }
    })()
    return () => {
      isCurrent = false
    }
  }, [start, site, choices, mended, machine, container, record, person.id, t])

  if (site !== undefined && !can('record-drain', { siteId: site.id })) {
    return (
      <Screen title={t('drains.form.title')} width="narrow">
        <Notice kind="note" title={t('problems.not-allowed.title')}>
          {t('problems.not-allowed.detail')}
        </Notice>
      </Screen>
    )
  }
  if (start === undefined || site === undefined || choices === undefined) {
    return (
      <Screen title={t('drains.form.title')} width="narrow">
        {isLoading || isSiteLoading || choices !== undefined ? (
          <Loading />
        ) : (
          <>
            <Text>
              {site === undefined ? t('session.site.noneDetail') : t('drains.form.noRecords')}
            </Text>
            <LinkText href="/drains">{t('drains.detail.toList')}</LinkText>
          </>
        )}
      </Screen>
    )
  }
  return (
    <DrainForm
      key={start.recordId}
      start={start}
      site={site}
      choices={choices}
      onAnother={(machine) =>
        setStart({
          recordId: newId(),
          values: withMachine(emptyOf(site, person.id), machine, choices),
          isDraft: false,
          title: t('drains.form.title'),
        })
      }
    />
  )
}

function emptyOf(site: Site, personId: string): DrainValues {
  return emptyDrain({
    unit: preferredUnit(site),
    massUnit: site.massUnit,
    method: preferredMethod(personId),
  })
}

/** An empty form with the machine and container of the link filled in, and what they say about the fluid. */
function freshStart(
  site: Site,
  choices: DrainChoices,
  personId: string,
  asked: Omit<Asked, 'record'>,
) {
  const machine = choices.machines.find(
    ({ id, code }) => id === asked.machine || code === asked.machine,
  )
  const container = choices.containers.find(
    ({ id, code }) => id === asked.container || code === asked.container,
  )
  const empty = withMachine(
    emptyOf(site, personId),
    machine === undefined ? null : { kind: 'listed', machineId: machine.id },
    choices,
  )
  const values: DrainValues = {
    ...empty,
    ...(container === undefined
      ? {}
      : {
          legs: [{ containerId: container.id, typed: '' }],
          streamId: empty.streamId === '' ? container.streamId : empty.streamId,
        }),
  }
  const { machine: withOne, fluidId, streamId, legs } = values
  // What a link names wins over a draft; what it does not name is left as it was.
  return {
    values,
    asked: machine === undefined ? {} : { machine: withOne, fluidId, streamId, legs },
  }
}

function withMachine(
  values: DrainValues,
  machine: DrainMachine,
  choices: DrainChoices,
): DrainValues {
  if (machine?.kind !== 'listed') return { ...values, machine }
  const listed = choices.machines.find(({ id }) => id === machine.machineId)
  if (listed === undefined) return values
  const best = bestContainer(choices.containers, {
    streamId: listed.streamId,
    litres: listed.reservoirLitres ?? '0',
  })
  return {
    ...values,
    machine,
    fluidId: listed.fluidId,
    streamId: listed.streamId,
    legs: [{ containerId: best?.id ?? '', typed: '' }],
  }
}
