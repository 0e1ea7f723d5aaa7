import { useLocalSearchParams } from 'expo-router'
import { YearScreen } from '@/modules/books/year-screen'
import type { BooksParams } from '@/modules/books/books-address'

export default function Year() {
  return <YearScreen params={useLocalSearchParams<BooksParams>()} />
}
