import { useLocalSearchParams } from 'expo-router'
import { PlanPickupScreen } from '@/modules/pickups/plan-pickup-screen'

export default function ChangePlan() {
  const { id } = useLocalSearchParams<{ id: string }>()
  return <PlanPickupScreen change={id} />
}
