import { Slot } from 'expo-router'
import { SignedInGate } from '@/modules/session/signed-in-gate'
import { Cautions } from '@/modules/yard/cautions'

export default function AppLayout() {
  return (
    <SignedInGate help={<Cautions />}>
      <Slot />
    </SignedInGate>
  )
}
