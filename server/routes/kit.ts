import { kitEndpoints } from '#shared/kit/contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { calibrateItem } from '../services/kit/calibrations.ts'
import { reportFault, resolveFault } from '../services/kit/faults.ts'
import { recordHygiene } from '../services/kit/hygiene.ts'
import { giveInduction, listInductions, takeInduction } from '../services/kit/inductions.ts'
import { readItemHistory } from '../services/kit/item-events.ts'
import { exportItems, importItems } from '../services/kit/item-lists.ts'
import { addItem, changeItem, listItems, readItem } from '../services/kit/items.ts'
import { addKind, changeKind, listKinds, readKind } from '../services/kit/kinds.ts'
import { addPhoto, readPhoto, removePhoto } from '../services/kit/photos.ts'

export const kitRoutes = (deps: Deps) =>
  serve(deps, kitEndpoints, {
    listKinds: ({ query }, { user }) => listKinds(deps, user, query),
    addKind: ({ body }, { user }) => addKind(deps, user, body),
    getKind: ({ params }, { user }) => readKind(deps, user, params.id),
    changeKind: ({ params, body }, { user, version }) => changeKind(deps, user, params.id, version, body),
    listInductions: ({ params, query }) => listInductions(deps, params.id, query),
    giveInduction: ({ params, body }, { user }) =>
      giveInduction(deps, user, params.id, params.kindId, body.givenOn),
    takeInduction: ({ params }) => takeInduction(deps, params.id, params.kindId),
    listItems: ({ query }, { user }) => listItems(deps, user, query),
    addItem: ({ body }, { user }) => addItem(deps, user, body),
    getItem: ({ params }, { user }) => readItem(deps, user, params.idOrTag),
    changeItem: ({ params, body }, { user, version }) => changeItem(deps, user, params.id, version, body),
    itemHistory: ({ params, query }, { user }) => readItemHistory(deps, user, params.id, query),
    exportItems: (_input, { user }) => exportItems(deps, user),
    importItems: ({ query }, { user, upload }) =>
      importItems(deps, user, upload.bytes, query.dryRun ?? false),
    recordHygiene: ({ params, body }, { user }) => recordHygiene(deps, user, params.id, body),
    calibrate: ({ params, body }, { user }) => calibrateItem(deps, user, params.id, body),
    reportFault: ({ params, body }, { user }) => reportFault(deps, user, params.id, body),
    resolveFault: ({ params, body }, { user }) => resolveFault(deps, user, params.id, body.note),
    addPhoto: ({ params }, { user, upload }) => addPhoto(deps, user, params.id, upload.bytes),
    getPhoto: ({ params, query }) => readPhoto(deps, params.id, query.size),
    removePhoto: ({ params }, { user }) => removePhoto(deps, user, params.id),
  })
