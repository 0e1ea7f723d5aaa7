import { useLocalSearchParams } from 'expo-router'
import { ContainerScreen } from '@/modules/containers/container-screen'

export default function Route() {
  const { code } = useLocalSearchParams<{ code: string }>()
  return <ContainerScreen code={code} />
}
