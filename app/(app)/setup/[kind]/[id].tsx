import { useLocalSearchParams } from 'expo-router'
import { RecordScreen } from '@/modules/setup/record-screen'

export default function SetUpRecord() {
  const { kind, id } = useLocalSearchParams<{ kind: string; id: string }>()
  return <RecordScreen key={`${kind} ${id}`} name={kind} id={id} />
}
