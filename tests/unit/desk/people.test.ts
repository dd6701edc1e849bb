import { expect, it } from 'vitest'
import { peopleLine } from '../../../components/editor/sheet/people'

it.each([
  [{ composer: 'Maren Holt', arranger: 'Maren Holt ' }, 'composed and arranged by Maren Holt'],
  [{ composer: 'Ines Okafor', arranger: 'Maren Holt' }, 'composed by Ines Okafor, arranged by Maren Holt'],
  [{ composer: 'Traditional (Wales)', arranger: 'Maren Holt' }, 'Traditional (Wales), arranged by Maren Holt'],
  [{ composer: '', arranger: 'Maren Holt' }, 'arranged by Maren Holt'],
  [{ composer: '', arranger: '' }, ''],
])('%o', (people, line) => expect(peopleLine(people)).toBe(line))
