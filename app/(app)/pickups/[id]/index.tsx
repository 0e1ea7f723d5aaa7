import { useLocalSearchParams } from 'expo-router'
import { PickupScreen } from '@/modules/pickups/pickup-screen'

export default function Route() {
  const { id } = useLocalSearchParams<{ id: string }>()
  return <PickupScreen id={id} />
}
