import { useLocalSearchParams } from 'expo-router'
import { LinesScreen } from '@/modules/books/lines-screen'
import type { BooksParams } from '@/modules/books/books-address'

export default function Lines() {
  return <LinesScreen params={useLocalSearchParams<BooksParams>()} />
}
