import { useLocalSearchParams } from 'expo-router'
import { DrainDetailScreen } from '@/modules/drains/drain-detail-screen'

export default function DrainDetail() {
  const { id } = useLocalSearchParams<{ id: string }>()
  return <DrainDetailScreen id={id} />
}
