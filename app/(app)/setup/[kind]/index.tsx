import { useLocalSearchParams } from 'expo-router'
import { RecordsScreen } from '@/modules/setup/records-screen'

export default function Records() {
  const { kind } = useLocalSearchParams<{ kind: string }>()
  return <RecordsScreen name={kind} />
}
