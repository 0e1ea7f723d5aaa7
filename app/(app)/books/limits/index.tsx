import { useLocalSearchParams } from 'expo-router'
import { LimitsScreen } from '@/modules/limits/limits-screen'

export default function Limits() {
  const { state = 'open' } = useLocalSearchParams<{ state?: string }>()
  return <LimitsScreen state={state} />
}
