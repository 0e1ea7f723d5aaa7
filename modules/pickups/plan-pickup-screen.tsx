import { useRouter } from 'expo-router'
import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { addDays, localDay } from '@/shared/calendar'
import { listContainers } from '@/shared/contracts/containers'
import { changePickup, planPickup, readPickup, type Pickup } from '@/shared/contracts/pickups'
import { call } from '../api/call'
import { CouldNotLoad } from '../api/could-not-load'
import { newId } from '../api/new-id'
import { useContract } from '../api/use-contract'
import { useCatalogue } from '../session/use-catalogue'
import { useSite } from '../session/site-provider'
import { LinkText } from '../ui/link-text'
import { Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { PlanForm, type Plan } from './plan-form'

/** A new plan, or a planned pickup changed. */
export function PlanPickupScreen({ change }: { change?: string }) {
  const { t } = useTranslation()
  const router = useRouter()
  const { site } = useSite()
  const { catalogue } = useCatalogue()
  // The record's id is made when the form opens, so that a repeated save is one record.
  const [id] = useState(newId)
  const [today] = useState(() => new Date())
  const pickup = useContract(readPickup, change === undefined ? null : { params: { id: change } })
  const siteId = pickup.data?.siteId ?? site?.id
  const ofSite = catalogue?.sites.find((one) => one.id === siteId)
  const containers = useContract(
    listContainers,
    siteId === undefined ? null : { query: { siteId } },
  )
  const ready =
    ofSite !== undefined &&
    catalogue !== undefined &&
    containers.data !== undefined &&
    (change === undefined || pickup.data !== undefined)
      ? { site: ofSite, catalogue, containers: containers.data.rows }
      : undefined
  const empty: Plan = {
    haulerId: null,
    facilityId: null,
    plannedOn: ofSite === undefined ? '' : addDays(localDay(today, ofSite.timeZone), 1),
    orderNumber: '',
    note: '',
    lines: [],
  }
  return (
    <Screen
      title={t(change === undefined ? 'pickups.plan.title' : 'pickups.plan.changeTitle')}
      width="narrow"
      before={<LinkText href="/pickups">{t('pickups.all')}</LinkText>}
    >
      {ready === undefined ? (
        containers.error === undefined && pickup.error === undefined ? (
          <Loading />
        ) : (
          <CouldNotLoad reply={containers.error === undefined ? pickup : containers} />
        )
      ) : (
        <PlanForm
          {...ready}
          before={pickup.data === undefined ? empty : planOf(pickup.data)}
          saveLabel={t('pickups.plan.save')}
          onSave={async (plan) => {
            if (pickup.data === undefined) {
              await call(planPickup, { body: { ...plan, id, siteId: ready.site.id } })
              router.replace(`/pickups/${id}`)
              return
            }
            const { version } = pickup.data
            // A changed plan has new lines: the ids of the old ones stay with what they meant.
            const lines = plan.lines.map((line) => ({ ...line, id: newId() }))
            await call(changePickup, {
              params: { id: pickup.data.id },
              body: { ...plan, lines, version },
            })
            router.replace(`/pickups/${pickup.data.id}`)
          }}
        />
      )}
    </Screen>
  )
}

function planOf(pickup: Pickup): Plan {
  return {
    haulerId: pickup.hauler?.id ?? null,
    facilityId: pickup.facility?.id ?? null,
    plannedOn: pickup.plannedOn,
    orderNumber: pickup.orderNumber,
    note: pickup.note,
    lines: pickup.lines.map(({ id, containerId, pieces, containerCount }) => ({
      id,
      containerId,
      pieces,
      containerCount,
    })),
  }
}
