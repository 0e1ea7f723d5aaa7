import { useLocalSearchParams } from 'expo-router'
import { AmendDrainScreen } from '@/modules/drains/amend-drain-screen'

export default function AmendDrain() {
  const { id } = useLocalSearchParams<{ id: string }>()
  return <AmendDrainScreen id={id} />
}
