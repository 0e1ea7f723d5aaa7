import { useLocalSearchParams } from 'expo-router'
import { VerifyScreen } from '@/modules/pickups/verify-screen'

export default function Verify() {
  const { hash } = useLocalSearchParams<{ hash: string }>()
  return <VerifyScreen hash={hash} />
}
