import { KernelError } from '#kernels/kernel-error.ts';
import { partitionAt, proposeInflections, type Inflection, type Partition } from './inflection.ts';
import type { MixtureData } from './mixture-data.ts';

/** A partition at a proposed inflection. */
export interface PartitionProposal {
  inflection: Inflection;
  partition: Partition;
}

/**
 * Partitions at the sharpest inflections of a log-probability curve, for a person to confirm on the
 * plot: those that give the curve back come first, by misfit.
 *
 * @param data ln grades from `mixtureData`, at least 30 different ones.
 * @param limit Inflections to try, 5 unless told.
 * @returns None for a straight curve. Inflections too near an end for a line through both sides, or
 *   whose upper population would lie under the lower, are left out.
 * @throws {KernelError} `too-few-rows`; `bad-parameter`.
 */
export function proposePartitions(data: MixtureData, limit = 5): PartitionProposal[] {
  if (!(limit >= 1)) throw new KernelError('bad-parameter', `expected 1 or more, found ${limit}`);
  return proposeInflections(data)
    .slice(0, limit)
    .flatMap((inflection): PartitionProposal[] => {
      const partition = partitionOrNull(data, inflection.upperShare);
      return partition && partition.upper.mean > partition.lower.mean
        ? [{ inflection, partition }]
        : [];
    })
    .sort((a, b) => a.partition.misfit - b.partition.misfit);
}

function partitionOrNull(data: MixtureData, upperShare: number): Partition | null {
  try {
    return partitionAt(data, upperShare);
  } catch (error) {
    if (error instanceof KernelError && error.code === 'too-few-rows') return null;
    throw error;
  }
}
