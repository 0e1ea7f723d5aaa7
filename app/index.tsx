import { Redirect } from 'expo-router'
import { homeOf } from '@/modules/session/app-shell'
import { useSessionGate } from '@/modules/session/session-context'

export default function Home() {
  const { state } = useSessionGate()
  return <Redirect href={state.status === 'signed-in' ? homeOf(state.person.role) : '/sign-in'} />
}
