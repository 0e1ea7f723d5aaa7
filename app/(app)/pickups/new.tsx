import { PlanPickupScreen } from '@/modules/pickups/plan-pickup-screen'

export default function NewPickup() {
  return <PlanPickupScreen />
}
