import { useLocalSearchParams } from 'expo-router'
import { SignInScreen } from '@/modules/session/sign-in-screen'

export default function SignIn() {
  const { next } = useLocalSearchParams<{ next?: string }>()
  return <SignInScreen next={next} />
}
