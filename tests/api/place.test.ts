import { expect, it } from 'vitest'
import { placeOfAddress } from '../../server/utils/place'

// Documentation addresses: RFC 3849 (2001:db8::/32), RFC 5737 (203.0.113.0/24).
it.each([
  ['203.0.113.7', '203.0.113.7'],
  ['::ffff:203.0.113.7', '203.0.113.7'],
  ['2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
  ['2001:db8:1:2::9', '2001:db8:1:2::/64'],
  ['2001:0DB8:0001:0002:ffff:ffff:ffff:ffff', '2001:db8:1:2::/64'],
  ['2001:db8::9', '2001:db8:0:0::/64'],
  ['2001:db8:1:3::9', '2001:db8:1:3::/64'],
  ['fe80::1%eth0', 'fe80:0:0:0::/64'],
  ['::1', '0:0:0:0::/64'],
  ['unknown', 'unknown'],
  ['not an address', 'not an address'],
])('%s is the place %s', (address, place) => expect(placeOfAddress(address)).toBe(place))
