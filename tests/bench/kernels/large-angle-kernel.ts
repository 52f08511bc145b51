/**
 * The baseline of `step-large-angle`: the large-angle equations of a two-propeller aeroplane written out in one function,
 * RK4 at 120 Hz on Float64Arrays, 14 states, nothing but what a calm flight needs (no gusts, faults, damper, changing
 * configuration or wind). Same elementary functions; density once a step. It exists to be compared with, in time and in
 * its numbers.
 */
import { packedDoubles } from '#shared/numerics/packed-doubles.ts';
import { sinCosInto } from '#shared/numerics/sin-cos.ts';
import type { Aircraft } from '#shared/model/aircraft.ts';
import { densityAt } from '#shared/model/atmosphere.ts';

const G = 9.80665;
const RHO0 = 1.225;
const DEGREE = 3.141592653589793 / 180;
const COS_70 = 0.3420201433256687;
const LAPSE = 0.0065;
const N_RHO = 4.2558797;

export interface KernelControls {
  aileron: number;
  rudder: number;
  path: number;
  lever: [number, number];
  dragArea: [number, number];
}

/** Advances `x` (beta, p, r, phi, theta, psi, V, north, east, height, aileron, rudder, thrust, thrust) by `steps`. */
export function createKernel(a: Aircraft, c: KernelControls): (x: Float64Array, steps: number) => void {
  const S = a.wingAreaM2;
  const b = a.spanM;
  const m = a.massKg;
  const { Ixx, Iyy, Izz, Ixz, CD0, kInduced, CDbeta2 } = a;
  const det = Ixx * Izz - Ixz * Ixz;
  const i1 = Izz / det;
  const i2 = Ixx / det;
  const i3 = Ixz / det;
  const fin = a.fin!; // the light twin has fin data
  const finSlope = (fin.areaM2 / S) * fin.liftSlopePerRad;
  const { armM, heightM: finHeight, rudderTau, stallAngleRad, stallDrop } = fin;
  const finBeta = 1 - fin.sidewash;
  const k3 = 3 * DEGREE;
  const { CL: rowCL, values: dv, slopes: ds } = a.derivatives;
  const lastRow = rowCL.length - 1;
  const limit = 0.95 * a.CLmax;
  const invLag = 1 / a.controls.lagS;
  const { aileronRateRadS, rudderRateRadS } = a.controls;
  const [left, right] = a.engines;
  const kneeL = (left.powerW / left.staticThrustN) ** 2;
  const kneeR = (right.powerW / right.staticThrustN) ** 2;
  const yawL = left.yEffectiveM + left.spin * left.swirlArmM;
  const yawR = right.yEffectiveM + right.spin * right.swirlArmM;
  const rollL = left.slipstreamLift * left.yM + left.spin * left.torqueArmM;
  const rollR = right.slipstreamLift * right.yM + right.spin * right.torqueArmM;
  const h = 1 / 120;
  const at = new Float64Array(14);
  const sum = new Float64Array(14);
  const k = new Float64Array(14);
  const angles = packedDoubles(12);

  return (x, steps) => {
    for (let step = 0; step < steps; step++) {
      const h0 = x[9];
      const rho0 = densityAt(h0);
      const T0 = 288.15 - LAPSE * h0;
      for (let stage = 0; stage < 4; stage++) {
        const s = stage === 0 ? x : at;
        const beta = s[0];
        const p = s[1];
        const r = s[2];
        const theta = s[4];
        const V = s[6];
        const da = s[10];
        const dr = s[11];
        angles[0] = beta;
        angles[1] = s[3];
        angles[2] = theta;
        angles[3] = s[5];
        sinCosInto(angles, 4);
        const sb = angles[4];
        const cb = angles[5];
        const sf = angles[6];
        const cf = angles[7];
        const st = angles[8];
        const ct = angles[9];
        const sp = angles[10];
        const cp = angles[11];
        const u = V * cb;
        const v = V * sb;
        const part = (-LAPSE * (s[9] - h0)) / T0;
        const rho = rho0 * (1 + N_RHO * part * (1 + 0.5 * (N_RHO - 1) * part * (1 + ((N_RHO - 2) / 3) * part)));
        const q = 0.5 * rho * V * V;
        const qS = q * S;
        let CL = cf < COS_70 ? (m * G) / qS : (m * ((u * (c.path - theta + r * sf)) / cf + G * ct * cf - p * v)) / qS;
        if (CL > limit) CL = limit;
        else if (CL < -0.2) CL = -0.2;
        const lift = qS * CL;
        let row = 0;
        while (row < lastRow && CL >= rowCL[row + 1]) row++;
        const d = CL > rowCL[row] ? CL - rowCL[row] : 0;
        const i = row * 15;
        const ph = (p * b) / (2 * V);
        const rh = (r * b) / (2 * V);
        let CY =
          (dv[i] + d * ds[i]) * beta +
          (dv[i + 1] + d * ds[i + 1]) * ph +
          (dv[i + 2] + d * ds[i + 2]) * rh +
          (dv[i + 3] + d * ds[i + 3]) * da +
          (dv[i + 4] + d * ds[i + 4]) * dr;
        let Cl =
          (dv[i + 5] + d * ds[i + 5]) * beta +
          (dv[i + 6] + d * ds[i + 6]) * ph +
          (dv[i + 7] + d * ds[i + 7]) * rh +
          (dv[i + 8] + d * ds[i + 8]) * da +
          (dv[i + 9] + d * ds[i + 9]) * dr;
        let Cn =
          (dv[i + 10] + d * ds[i + 10]) * beta +
          (dv[i + 11] + d * ds[i + 11]) * ph +
          (dv[i + 12] + d * ds[i + 12]) * rh +
          (dv[i + 13] + d * ds[i + 13]) * da +
          (dv[i + 14] + d * ds[i + 14]) * dr;
        const angle = beta * finBeta + (p * finHeight - r * armM) / V - rudderTau * dr;
        const size = Math.abs(angle);
        const stall = angle * dr < 0 ? stallAngleRad + 0.5 * rudderTau * Math.abs(dr) : stallAngleRad;
        if (size > stall - k3) {
          let g: number;
          if (size <= stall + k3) g = size - (size - stall + k3) ** 2 / (4 * k3);
          else {
            const y = Math.min(1, (size - stall - k3) / (10 * DEGREE));
            g = stall * (1 - stallDrop * (3 * y * y - 2 * y * y * y));
          }
          const dCY = -finSlope * (angle < 0 ? size - g : g - size);
          CY += dCY;
          Cl += (dCY * finHeight) / b;
          Cn -= (dCY * armM) / b;
        }
        const sigma = rho / RHO0;
        const TL = s[12];
        const TR = s[13];
        const shortL = (c.lever[0] * sigma * left.powerW) / Math.sqrt(V * V + kneeL) - TL;
        const shortR = (c.lever[1] * sigma * right.powerW) / Math.sqrt(V * V + kneeR) - TR;
        k[12] = shortL / (shortL < 0 ? left.spoolDownS : left.spoolUpS);
        k[13] = shortR / (shortR < 0 ? right.spoolDownS : right.spoolUpS);
        const DL = q * c.dragArea[0];
        const DR = q * c.dragArea[1];
        const drag = qS * (CD0 + kInduced * CL * CL + CDbeta2 * beta * beta);
        const fx = (TL + TR - DL - DR - drag) / m - G * st;
        const fy = (qS * CY) / m + G * ct * sf;
        const qp = (lift / m - G * ct * cf + p * v) / u;
        k[6] = cb * fx + sb * fy;
        k[0] = (cb * fy - sb * fx) / V - r;
        const L = qS * b * Cl - rollL * TL - rollR * TR - qp * r * (Izz - Iyy) + Ixz * p * qp;
        const N =
          qS * b * Cn - yawL * TL - yawR * TR + left.yM * DL + right.yM * DR - p * qp * (Iyy - Ixx) - Ixz * qp * r;
        k[1] = i1 * L + i3 * N;
        k[2] = i3 * L + i2 * N;
        const turn = (qp * sf + r * cf) / ct;
        k[3] = p + turn * st;
        k[4] = qp * cf - r * sf;
        k[5] = turn;
        const ahead = u * ct + v * sf * st;
        k[7] = ahead * cp - v * cf * sp;
        k[8] = ahead * sp + v * cf * cp;
        k[9] = u * st - v * sf * ct;
        const ra = (c.aileron - da) * invLag;
        k[10] = ra > aileronRateRadS ? aileronRateRadS : ra < -aileronRateRadS ? -aileronRateRadS : ra;
        const rr = (c.rudder - dr) * invLag;
        k[11] = rr > rudderRateRadS ? rudderRateRadS : rr < -rudderRateRadS ? -rudderRateRadS : rr;

        if (stage === 0) for (let j = 0; j < 14; j++) sum[j] = k[j];
        else if (stage < 3) for (let j = 0; j < 14; j++) sum[j] += 2 * k[j];
        if (stage < 3) {
          const part2 = stage === 2 ? h : 0.5 * h;
          for (let j = 0; j < 14; j++) at[j] = x[j] + part2 * k[j];
        }
      }
      for (let j = 0; j < 14; j++) x[j] += (h / 6) * (sum[j] + k[j]);
    }
  };
}
