import { ContainersScreen } from '@/modules/containers/containers-screen'

export default ContainersScreen
