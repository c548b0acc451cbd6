// What a component test waits for may take longer on a machine that is busy with other tests; what never comes still fails.
import { configure } from '@testing-library/react'

configure({ asyncUtilTimeout: 10_000 })
