import { useLocalSearchParams } from 'expo-router'
import { FlagScreen } from '@/modules/limits/flag-screen'

export default function Flag() {
  const { id } = useLocalSearchParams<{ id: string }>()
  return <FlagScreen id={id} />
}
