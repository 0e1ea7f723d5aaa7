import { useLocalSearchParams } from 'expo-router'
import { DrainFormScreen } from '@/modules/drains/drain-form-screen'

export default function NewDrain() {
  const { machine, container, record } = useLocalSearchParams<{
    machine?: string
    container?: string
    record?: string
  }>()
  return <DrainFormScreen machine={machine} container={container} record={record} />
}
