import { test } from '@playwright/test'
import { tuningFigures } from './tunings'

// No page and no server: the engine is pure.
test('charts and rankings of tunings', () => tuningFigures().forEach(line => console.log(line)))
