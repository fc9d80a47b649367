import { careEndpoints } from './care-contract.ts'
import { faultEndpoints } from './fault-contract.ts'
import { itemEndpoints } from './item-contract.ts'
import { kindEndpoints } from './kind-contract.ts'
import { photoEndpoints } from './photo-contract.ts'

/** Kit: the kinds, the items with their care, faults and photos. */
export const kitEndpoints = {
  ...kindEndpoints,
  ...itemEndpoints,
  ...careEndpoints,
  ...faultEndpoints,
  ...photoEndpoints,
}
