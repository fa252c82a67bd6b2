/**
 * A driver as a moving mass: force by motor, held by suspension and box, and the port's air behind it.
 * The pressure far away follows the acceleration of all moving volume. In units of a mass of one:
 *
 *   x'' = b(x) v - (w0/Q) x' - w0^2 x - a w0^2 (x + y)       cone
 *   y'' = -wb^2 (x + y) - (wb/Qp) y' - d |y'| y'             air in the port
 *   p   = x'' + y''
 *
 * The motor weakens with excursion, b(x) = 1/(1 + ((x - x0)/X)^2), and the port's air turns turbulent.
 */
import type { Stage } from "./filters";

export interface DriverSetting {
  resonanceHz: number;
  q: number;
  /** The motor's force halves at the excursion that a sine of `levelDb` at `frequencyHz` needs. */
  motor: { levelDb: number; frequencyHz: number; offset: number };
  port?: {
    tuningHz: number;
    /** Box stiffness over suspension stiffness. */
    compliance: number;
    q: number;
    /** Port output, as level, at which turbulence alone would bring the port's Q down to `turbulentQ`. */
    levelDb: number;
    turbulentQ: number;
  };
}

export class Driver implements Stage {
  private x = 0;
  private velocity = 0;
  private y = 0;
  private portVelocity = 0;
  private readonly dt: number;
  private readonly stiffness: number;
  private readonly damping: number;
  private readonly perExcursion: number;
  private readonly box: number;
  private readonly portStiffness: number;
  private readonly portDamping: number;
  private readonly turbulence: number;

  /** @param peakAt0Db amplitude of a sine at 0 dB. */
  constructor(
    private readonly setting: DriverSetting,
    peakAt0Db: number,
    rateHz: number,
  ) {
    const { resonanceHz, q, motor, port } = setting;
    const omega = 2 * Math.PI * resonanceHz;
    const peak = (levelDb: number): number => peakAt0Db * 10 ** (levelDb / 20);
    this.dt = 1 / rateHz;
    this.stiffness = omega ** 2;
    this.damping = omega / q;
    this.perExcursion = (2 * Math.PI * motor.frequencyHz) ** 2 / peak(motor.levelDb);
    const tuning = 2 * Math.PI * (port?.tuningHz ?? 0);
    this.box = (port?.compliance ?? 0) * this.stiffness;
    this.portStiffness = tuning ** 2;
    this.portDamping = port ? tuning / port.q : 0;
    // A quadratic resistance d |y'| y' acts like the linear one 8/(3 pi) d y'_peak.
    const portSpeed = port ? peak(port.levelDb) / tuning : 1;
    this.turbulence = port ? (tuning / port.turbulentQ / portSpeed) * ((3 * Math.PI) / 8) : 0;
  }

  process(block: Float64Array): void {
    const { dt, stiffness, damping, perExcursion, box, portStiffness, portDamping, turbulence } =
      this;
    const { offset } = this.setting.motor;
    const rest = 1 + offset * offset;
    let { x, velocity, y, portVelocity } = this;
    for (let n = 0; n < block.length; n += 1) {
      const shift = x * perExcursion - offset;
      const force = ((block[n] ?? 0) * rest) / (1 + shift * shift);
      const pressed = x + y;
      const acceleration = force - damping * velocity - stiffness * x - box * pressed;
      const portAcceleration =
        -portStiffness * pressed -
        (portDamping + turbulence * Math.abs(portVelocity)) * portVelocity;
      velocity += acceleration * dt;
      x += velocity * dt;
      portVelocity += portAcceleration * dt;
      y += portVelocity * dt;
      block[n] = acceleration + portAcceleration;
    }
    Object.assign(this, { x, velocity, y, portVelocity });
  }
}

/** A small driver far above its resonance: y = v + a2 v^2 + a3 v^3, at a level where v has peak 1. */
export class Polynomial implements Stage {
  private readonly scale: number;

  constructor(
    private readonly setting: PolynomialSetting,
    peakAt0Db: number,
  ) {
    this.scale = 1 / (peakAt0Db * 10 ** (setting.levelDb / 20));
  }

  process(block: Float64Array): void {
    const { second, third } = this.setting;
    const { scale } = this;
    for (let n = 0; n < block.length; n += 1) {
      const x = block[n] ?? 0;
      const v = x * scale;
      block[n] = x * (1 + v * (second + v * third));
    }
  }
}

export interface PolynomialSetting {
  levelDb: number;
  second: number;
  third: number;
}
