import type { Simulation as SimulationWire } from '../../../shared/contracts/simulations';
import { encodeArray } from '../../../shared/domain/array-encoding';
import { fromBlob } from '../../entities/float64-blob.ts';
import type { Simulation } from '../../entities/simulation.ts';

/** The four arrays of a simulation. */
export async function loadSimulationArrays(simulation: Simulation): Promise<{ frame: Float64Array; reference: Float64Array; clean: Float64Array; truthImage: Float64Array }> {
  const need = async (what: string, blob: Promise<Uint8Array | undefined>): Promise<Float64Array> => {
    const bytes = await blob;
    if (!bytes) throw new Error(`The simulation ${simulation.contentHash} has no ${what}.`);
    return fromBlob(bytes);
  };
  return {
    frame: await need('frame', simulation.frame.load()),
    reference: await need('reference', simulation.reference.load()),
    clean: await need('clean data', simulation.clean.load()),
    truthImage: await need('ground truth', simulation.truthImage.load()),
  };
}

/** In the shape of the wire. Whatever tells of the ground truth is left out where it is sealed to the reader. */
export async function toSimulationWire(simulation: Simulation, seeTruth: boolean): Promise<SimulationWire> {
  const { frame, reference, clean, truthImage } = await loadSimulationArrays(simulation);
  const { summary } = simulation;
  return {
    ...summary,
    contentHash: simulation.contentHash,
    frame: [...frame],
    reference: [...reference],
    clean: [...clean],
    truth: seeTruth ? encodeArray(truthImage) : null,
    truthRange: seeTruth ? summary.truthRange : null,
    targets: seeTruth ? summary.targets : null,
    checks: simulation.checks ?? [],
    seconds: simulation.seconds,
  };
}
