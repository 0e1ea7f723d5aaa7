import '@testing-library/jest-dom'
import { configure } from '@testing-library/react'

// The first screen of a run is compiled while it is awaited.
configure({ asyncUtilTimeout: 10_000 })
