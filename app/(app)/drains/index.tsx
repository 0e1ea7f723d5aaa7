import { useLocalSearchParams } from 'expo-router'
import { DrainListScreen } from '@/modules/drains/drain-list-screen'

type Filters = Partial<Record<'site' | 'from' | 'to' | 'state' | 'machine' | 'search', string>>

export default function Drains() {
  const {
    site = '',
    from = '',
    to = '',
    state = '',
    machine = '',
    search = '',
  } = useLocalSearchParams<Filters>()
  return <DrainListScreen filters={{ site, from, to, state, machine, search }} />
}
