import { labelOf } from '#shared/batches/label'
import { strengthBetween } from '#shared/batches/standing'
import type { Deps } from '../../deps.ts'
import { drawLabelSheet } from '../../pdf/label-sheet.ts'
import { readableBatch } from './access.ts'
import { gravitiesOf, loadFacts } from './facts.ts'
import { bottlingsOf } from './view.ts'

/** A sheet of labels for a batch: as it was bottled, or as it stands. */
export function labelSheet(
  deps: Deps,
  memberId: string,
  batchId: string,
  { rows, columns }: { rows: number; columns: number },
) {
  const { batch, memberName } = readableBatch(deps.db, memberId, batchId)
  const facts = loadFacts(deps.db, [batchId])(batchId)
  const [bottling] = bottlingsOf(deps.db, batchId)
  const gravity = facts.readings.at(-1)?.correctedGravity
  const { og } = gravitiesOf(batch, facts)
  const strength = gravity === undefined ? undefined : strengthBetween(og, gravity)?.percent
  const label = labelOf({
    name: batch.name,
    style: batch.style,
    maker: memberName,
    abvPercent: bottling?.abvPercent ?? strength,
    bottledOn: bottling?.bottledOn,
    bottleMl: bottling?.bottleMl ?? batch.bottleMl,
    // Caps and corks are not in the drink.
    ingredients: facts.lines.filter(
      (line) => line.kind !== 'closure' && line.kind !== 'bottle' && line.kind !== 'label',
    ),
    sulphiteMgPerLitre: batch.sulphiteMgPerLitre,
    carbonated: (bottling?.targetVolumesCo2 ?? batch.targetVolumesCo2 ?? 0) > 0,
  })
  const body = drawLabelSheet({
    label,
    address: `${deps.appUrl}/batches/${batchId}`,
    rows,
    columns,
    madeAt: new Date(deps.clock.now()),
  })
  return { body, type: 'application/pdf', downloadName: `labels-${batchId}.pdf` }
}
