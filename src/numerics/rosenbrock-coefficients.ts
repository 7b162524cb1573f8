/** Published coefficients of two linearly implicit (Rosenbrock) methods, apart from the algorithm that uses them. */

/**
 * A Rosenbrock method in the transformed form that needs no matrix product (Hairer & Wanner 1996, sec. IV.7):
 * (1/(h gamma) I - J) u_i = f(t + c_i h, w_i) + h d_i f_t + sum_{j<i} (C_ij/h) u_j, w_i = y + sum_{j<i} a_ij u_j;
 * the stages after `explicitStages` take w_i = w_(i-1) + u_(i-1). New solution w_s + u_s, embedded error u_s.
 */
export interface RosenbrockTableau {
  readonly name: string;
  readonly order: number;
  readonly embeddedOrder: number;
  readonly stages: number;
  /** Stages whose argument is built from `a`; each later one adds the previous increment. */
  readonly explicitStages: number;
  readonly gamma: number;
  readonly a: readonly (readonly number[])[];
  readonly C: readonly (readonly number[])[];
  readonly c: readonly number[];
  readonly d: readonly number[];
  readonly source: string;
}

export const RODAS4: RosenbrockTableau = {
  name: "rodas4",
  order: 4,
  embeddedOrder: 3,
  stages: 6,
  explicitStages: 5,
  gamma: 0.25,
  a: [
    [],
    [1.544],
    [0.9466785280815826, 0.2557011698983284],
    [3.314825187068521, 2.896124015972201, 0.9986419139977817],
    [1.221224509226641, 6.019134481288629, 12.53708332932087, -0.687886036105895],
  ],
  C: [
    [],
    [-5.6688],
    [-2.430093356833875, -0.2063599157091915],
    [-0.1073529058151375, -9.594562251023355, -20.47028614809616],
    [7.496443313967647, -10.24680431464352, -33.99990352819905, 11.7089089320616],
    [8.083246795921522, -7.981132988064893, -31.52159432874371, 16.31930543123136, -6.058818238834054],
  ],
  c: [0, 0.386, 0.21, 0.63, 1, 1],
  d: [0.25, -0.1043, 0.1035, -0.0362, 0, 0],
  source: "Hairer E. & Wanner G. 1996, Solving Ordinary Differential Equations II, sec. IV.7",
};

export const RODAS5P: RosenbrockTableau = {
  name: "rodas5p",
  order: 5,
  embeddedOrder: 4,
  stages: 8,
  explicitStages: 6,
  gamma: 0.21193756319429014,
  a: [
    [],
    [3.0],
    [2.849394379747939, 0.45842242204463923],
    [-6.954028509809101, 2.489845061869568, -10.358996098473584],
    [2.8029986275628964, 0.5072464736228206, -0.3988312541770524, -0.04721187230404641],
    [-7.502846399306121, 2.561846144803919, -11.627539656261098, -0.18268767659942256, 0.030198172008377946],
  ],
  C: [
    [],
    [-14.155112264123755],
    [-17.97296035885952, -2.859693295451294],
    [147.12150275711716, -1.41221402718213, 71.68940251302358],
    [165.43517024871676, -0.4592823456491126, 42.90938336958603, -5.961986721573306],
    [24.854864614690072, -3.0009227002832186, 47.4931110020768, 5.5814197821558125, -0.6610691825249471],
    [
      30.91273214028599, -3.1208243349937974, 77.79954646070892, 34.28646028294783, -19.097331116725623,
      -28.087943162872662,
    ],
    [
      37.80277123390563, -3.2571969029072276, 112.26918849496327, 66.9347231244047, -40.06618937091002,
      -54.66780262877968, -9.48861652309627,
    ],
  ],
  c: [0, 0.6358126895828704, 0.4095798393397535, 0.9769306725060716, 0.4288403609558664, 1, 1, 1],
  d: [0.21193756319429014, -0.42387512638858027, -0.3384627126235924, 1.8046452872882734, 2.325825639765069, 0, 0, 0],
  source: "Steinebach G. 2023, BIT Numer. Math. 63, 27",
};
