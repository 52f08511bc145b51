/**
 * Places of the numbers that the right-hand sides read and that do not change within a tick (`Core.h`), of the
 * per-engine ones (`Core.e`), and of what a recorded evaluation leaves behind (`Core.made`).
 * One flat Float64Array each: a write to a captured `let` would allocate.
 */
// constants of the aircraft and the start
export const H_AREA = 0;
export const H_SPAN = 1;
export const H_MASS = 2;
export const H_INV_ROLL = 3; // Izz/(Ixx·Izz − Ixz²)
export const H_INV_BOTH = 4; // Ixz/(…)
export const H_INV_YAW = 5; // Ixx/(…)
export const H_IZZ_IYY = 6; // Izz − Iyy
export const H_IYY_IXX = 7; // Iyy − Ixx
export const H_IXZ = 8;
export const H_CL_TRIM = 9;
export const H_INV_LAG = 10;
export const H_AILERON_RATE = 11;
export const H_RUDDER_RATE = 12;
export const H_INV_WASHOUT = 14;
export const H_HAS_JET = 15;
export const H_HAS_FIN = 16;
export const H_FIN_SLOPE = 17; // area/S · lift slope
export const H_FIN_BETA = 18; // 1 − sidewash
export const H_FIN_HEIGHT = 19;
export const H_FIN_ARM = 20;
export const H_FIN_TAU = 21;
export const H_FIN_STALL = 22;
// configuration, blended while it changes
export const H_ROWS = 23; // first row of the configuration in force
export const H_ROWS_END = 24; // its last row
export const H_ROWS_OLD = 25; // the same of the configuration that is left
export const H_ROWS_OLD_END = 26;
export const H_SHARE_OLD = 27; // 0 when no change is under way
export const H_CL_LIMIT = 28; // 0.95 CLmax
export const H_CD0 = 29;
export const H_K_INDUCED = 30;
export const H_CD_BETA2 = 31;
export const H_CL_ALPHA = 32;
export const H_ALPHA_ZERO_LIFT = 33;
// air
export const H_TIME = 34;
export const H_REF_HEIGHT = 35;
export const H_REF_DENSITY = 36;
export const H_REF_TEMPERATURE = 37;
export const H_REF_JET = 38; // σ^0.8
export const H_TROPOSPHERE = 39;
export const H_WIND_VARIES = 40;
export const H_WIND_NORTH = 41;
export const H_WIND_EAST = 42;
export const H_GUST_V = 43;
export const H_GUST_P = 44;
export const H_GUST_R = 45;
export const H_GUST_COUNT = 46;
// pitch
export const H_PITCH = 47; // 0 hold-lift, 1 follow the path
export const H_PATH = 48;
export const H_PATH_RATE = 49;
export const H_INTEGRAL_NEXT = 50;
// controls
export const H_AILERON_CMD = 51;
export const H_AILERON_EFFECT = 53;
export const H_DECAY_HALF = 54; // exp(−t/lag) over half a tick and a whole one
export const H_RUDDER_CMD = 55;
export const H_INV_LAG_RUDDER = 56;
export const H_RUDDER_PILOT = 57; // the pilot's share
export const H_RUDDER_TRIM = 58;
export const H_DAMPER = 59; // the yaw damper's share
export const H_DECAY_FULL = 60;
export const H_RATIO = 61;
export const H_EAS = 62;
export const H_FIN_DROP = 63;
export const H_CONFIG_HELD = 64; // index of the settled configuration the held numbers are of, −1 none
// small-disturbance: the constant derivatives of the trim, speed, cos and tan of the path
export const H_COS_PATH = 65;
export const H_TAN_PATH = 66;
export const H_SIN_PATH = 67;
/** Density at the start of the tick (of the start of the run in the small-disturbance motion). */
export const H_DENSITY = 68;
export const H_CL_LOWEST = 69;
/** Surfaces at half and at the end of the tick. */
export const H_AILERON_HALF = 70;
export const H_AILERON_FULL = 71;
export const H_RUDDER_HALF = 72;
export const H_RUDDER_FULL = 73;
export const HELD_LENGTH = 74;

// per engine
export const E_FACTOR = 0; // share of the healthy full-lever thrust that is asked for
export const E_BASE = 1; // W for propellers, N for jets
export const E_KNEE2 = 2; // (P/Ts)², −1 for jets
export const E_YAW_ARM = 3;
export const E_ROLL_ARM = 4;
export const E_Y = 5;
export const E_AREA = 6; // drag area at the start of the tick
export const E_AREA_RATE = 7;
export const E_INV_DOWN = 8;
export const E_INV_UP = 9;
export const E_FEATHER_NEXT = 10;
export const E_LEVER = 11;
export const ENGINE_STRIDE = 12;

// recorded evaluation
export const M_CL = 0;
export const M_QBAR = 1;
export const M_DENSITY = 2;
export const M_LIFT = 3;
export const M_DRAG = 4;
export const M_FORWARD = 5;
export const M_ENGINE_YAW = 6;
export const M_ENGINE_ROLL = 7;
export const M_BETA_AIR = 8;
export const M_P_AIR = 9;
export const M_R_AIR = 10;
export const M_CY = 11; // stall increment included
export const M_CROLL = 12;
export const M_CYAW = 13;
export const M_FIN_CY = 14; // the stall increment alone
export const M_FIN_ANGLE = 15;
export const M_Q_PITCH = 16;
export const M_WIND_NORTH = 17;
export const M_WIND_EAST = 18;
export const M_WIND_AX = 19; // dW/dt along body axes
export const M_WIND_AY = 20;
export const M_WIND_AZ = 21;
export const M_GUST_V = 22;
export const M_GUST_P = 23;
export const M_GUST_R = 24;
export const M_SIGMA_JET = 25;
export const M_SOUND = 26;
export const M_LET_GO = 27; // not 0 when the assistant lets go
export const M_REGIME = 28; // which pieces of the equations hold; a change within a step is a corner
export const MADE_LENGTH = 29;
