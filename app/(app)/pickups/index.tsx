import { PickupsScreen } from '@/modules/pickups/pickups-screen'

export default PickupsScreen
