import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import type { DataKind } from '../../../shared/domain/phantom-definition';
import { matrixOperator } from '../../core/matrix-operator';
import { applySparse } from '../../core/sparse';
import { requireVector } from '../../core/vector';
import { matmul, matmulTransposed, transpose } from '../../linear-algebra/matrix-product';
import type { InversionProblem } from '../problem-family';
import { bodyGrid } from './body-grid';
import { projectOnCells } from './cell-projection';
import { cellJumps, cellPenalty, conductivityCells, pixelShares } from './conductivity-cells';
import { electrodeIntegrals } from './electrode-integrals';
import { electrodeModel, solveElectrodes } from './electrode-model';
import { electrodeFrame, type ElectrodeFrame } from './electrodes';
import { inversionDetail, inversionMesh, type InversionDetail } from './inversion-mesh';
import { frameJacobian, pairWeights } from './jacobian';
import { frameSize, measure, patternCount } from './patterns';
import { reciprocalBasis } from './reciprocal-basis';
import { elementsByCell, pairSensitivities, unitStiffness } from './sensitivity';
import { contactNumber, contactNumbers } from './simulation';

/** The inversion model of electrical impedance, with what the floor and the checks need beyond the common contract. */
export interface EitInversion extends InversionProblem {
  readonly geometry: EitGeometry;
  /** Centroids of the cells, x, y per cell, m, in the body. */
  readonly cellCentres: Float64Array;
  /** Elements and nodes of the potential. */
  readonly elements: number;
  readonly nodes: number;
}

interface Solved {
  readonly x: Float64Array;
  readonly frame: Float64Array;
  /** Potentials of unit currents through adjacent pairs of electrodes, node-major, nodes x L. */
  readonly fields: Float64Array;
}

/**
 * The forward problem of an inversion: complete electrode model on the inversion's own mesh, conductivity constant on about
 * 1,600 cells.
 *
 * The derivative is exact for the discrete model: with u_j the potential for the unit current into electrode j and out of the
 * next, d(U_k - U_{k+1}) = -sum over cells of dsigma times the integral of grad u_j . grad u_k (adjoint formula; Vauhkonen
 * 1997, from memory).
 * @param background S/m
 */
export function createEitInversion(geometry: EitGeometry, background: number, dataKind: DataKind, detail?: InversionDetail): EitInversion {
  if (!(background > 0 && background < Infinity)) throw new RangeError(`The background conductivity must be positive, not ${background} S/m.`);
  const L = geometry.electrodes;
  const radius = geometry.body.radius;
  const frame = electrodeFrame(geometry);
  const contact = contactNumber(geometry, background);
  const zeta = contactNumbers(geometry, background).map((value) => value / background);
  const meshes = inversionMesh(frame, detail ?? inversionDetail(contact, geometry.electrodes));
  const { elements: mesh, cellOf } = meshes;
  const cells = conductivityCells(meshes.cells, mesh, cellOf, radius);
  const grid = bodyGrid(geometry);
  const shares = pixelShares(meshes.cells, grid, frame);
  const electrodes = electrodeIntegrals(mesh, frame);
  const model = electrodeModel(mesh, electrodes);
  const dataSize = frameSize(geometry);
  const unknowns = cells.count;
  const stiffness = unitStiffness(mesh);
  const groups = elementsByCell(cellOf, unknowns);
  const pairScratch = new Float64Array(unknowns * L * L);
  const pairCurrents = new Float64Array(L * L);
  for (let j = 0; j < L; j++) {
    pairCurrents[j * L + j] = 1;
    pairCurrents[j * L + ((j + 1) % L)] = -1;
  }
  const patterns = patternCount(geometry);
  const drive = pairWeights(geometry);
  const sigma = { stiffness, perElement: new Float64Array(cellOf.length) };

  let latest: Solved | null = null;
  const solve = (x: Float64Array): Solved => {
    requireVector(x, unknowns, 'The vector of cell conductivities');
    if (latest && sameValues(latest.x, x)) return latest;
    for (let t = 0; t < cellOf.length; t++) {
      const value = x[cellOf[t]];
      if (!(value > 0)) throw new RangeError(`Cell ${cellOf[t]} has the conductivity ${value} S/m: it must be positive.`);
      sigma.perElement[t] = value;
    }
    const { voltages, unitPotentials } = solveElectrodes(model, sigma, zeta, pairCurrents);
    // voltages: row j for pair current j. Fields: sum over electrodes of U_l times the potential of unit voltage on l.
    const fields = matmulTransposed(transpose(unitPotentials, L, model.pattern.n), voltages, model.pattern.n, L, L);
    const electrodeVoltages = matmul(drive, voltages, patterns, L, L);
    latest = { x: x.slice(), frame: measure(geometry, electrodeVoltages), fields };
    return latest;
  };
  const uniform = new Float64Array(unknowns).fill(background);
  const reference = solve(uniform).frame;

  return {
    family: 'electrical-impedance',
    geometry,
    dataKind,
    dataSize,
    unknowns,
    unknownWeights: cells.areas,
    grid,
    unit: 'S/m',
    lowerBound: 1e-3 * background,
    cellCentres: centresInBody(cells.centroids, frame),
    elements: cellOf.length,
    nodes: model.pattern.n,
    background: () => uniform.slice(),
    frameOf: (x) => solve(x).frame.slice(),
    evaluate(x) {
      const data = solve(x).frame.slice();
      if (dataKind === 'difference') for (let i = 0; i < dataSize; i++) data[i] -= reference[i];
      return data;
    },
    linear: false,
    dataBasis: reciprocalBasis(geometry),
    linearise(x) {
      const pairs = pairSensitivities(mesh, stiffness, groups, solve(x).fields, L, pairScratch);
      return matrixOperator(frameJacobian(geometry, pairs, unknowns), dataSize, unknowns);
    },
    toImage: (x, out) => applySparse(shares, x, out),
    penalty: (kind) => cellPenalty(cells, kind),
    jumps: () => cellJumps(cells),
    project: (truth) => projectOnCells(truth, mesh, cellOf, unknowns, cells.areas, frame),
  };
}

function centresInBody(centroids: Float64Array, frame: ElectrodeFrame): Float64Array {
  const centres = new Float64Array(centroids.length);
  for (let c = 0; c < centres.length; c += 2) centres.set(frame.toBody(centroids[c] / frame.radius, centroids[c + 1] / frame.radius), c);
  return centres;
}

function sameValues(a: Float64Array, b: Float64Array): boolean {
  for (let i = 0; i < a.length; i++) if (a[i] !== b[i]) return false;
  return true;
}
