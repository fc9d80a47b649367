import { yeastEndpoints } from '#shared/yeast/contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { clearLot, withdrawLot } from '../services/yeast/lots.ts'
import { addPacket, changePacket, copyPacket, discardPacket, readPacket } from '../services/yeast/packets.ts'
import { addPacketPhoto, readPacketPhoto, removePacketPhoto } from '../services/yeast/photo.ts'
import { listPitches, pitchInto, readPitch, reportOutcome } from '../services/yeast/pitches.ts'
import { listPackets, listStrains, packetAnswer } from '../services/yeast/vitality.ts'

export const yeastRoutes = (deps: Deps) =>
  serve(deps, yeastEndpoints, {
    list: ({ query }, { user }) => listPackets(deps, user, query),
    create: ({ body }, { user }) => addPacket(deps, user, body),
    get: ({ params }, { user }) => readPacket(deps, user, params.id),
    change: ({ params, body }, { user, version }) => changePacket(deps, user, params.id, version, body),
    copy: ({ params, body }, { user }) => copyPacket(deps, user, params.id, body),
    discard: ({ params, body }, { user }) => discardPacket(deps, user, params.id, body.note),
    addPhoto: ({ params }, { user, upload }) => addPacketPhoto(deps, user, params.id, upload.bytes),
    photo: ({ params, query }, { user }) => readPacketPhoto(deps, user, params.id, query.size),
    removePhoto: ({ params }, { user }) => removePacketPhoto(deps, user, params.id),
    vitality: ({ params, query }, { user }) => packetAnswer(deps, user, params.id, query),
    strains: ({ query }, { user }) => listStrains(deps, user, query),
    pitch: ({ params, body }, { user }) => pitchInto(deps, user, params.id, body),
    pitches: ({ query }, { user }) => listPitches(deps, user, query),
    getPitch: ({ params }, { user }) => readPitch(deps, user, params.id),
    report: ({ params, body }, { user }) => reportOutcome(deps, user, params.id, body),
    withdrawLot: ({ params, body }, { user }) => withdrawLot(deps, user, params.id, body.note),
    clearLot: ({ params, body }, { user }) => clearLot(deps, user, params.id, body.note),
  })
