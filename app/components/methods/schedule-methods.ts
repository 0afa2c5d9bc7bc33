import type { MethodGroup } from './method';

const byR = 'R optimize and integrate';

export const scheduleMethods: MethodGroup = {
  id: 'question-3',
  title: 'Does a schedule pay? What is to come?',
  methods: [
    {
      id: 'age-replacement',
      name: 'Age replacement',
      decides: 'The cost of replacing each item at an age or at failure, and the best age.',
      formulas: [
        String.raw`C(T) = \frac{C_p R(T) + C_f (1 - R(T))}{\int_0^T R(t)\,dt}, \quad C(\infty) = \frac{C_f}{\text{MTTF}}`,
      ],
      symbols: [
        ['C_p', 'cost of one planned renewal'],
        ['C_f', 'cost of one failure, with labour, parts and consequence'],
        ['T', 'the interval'],
      ],
      assumes: ['A renewed item is as good as new. For β at or below 1 no interval is best.'],
      source: 'Barlow & Hunter 1960',
      checks: [
        { id: 'age-replacement-2-5', what: 'best T/η, β = 2, C_f/C_p = 5', value: '0.510655', source: byR },
        { id: 'age-replacement-3-10', what: 'best T/η, β = 3, C_f/C_p = 10', value: '0.382456', source: byR },
        {
          id: 'age-replacement-cost',
          what: 'its cost beside run to failure, β = 2, C_f/C_p = 5',
          value: '0.724090',
          source: byR,
        },
      ],
    },
    {
      id: 'minimal-repair',
      name: 'Minimal repair with periodic renewal',
      decides: 'The price where most failures are patched.',
      formulas: [
        String.raw`C(T) = \frac{C_p + C_f (T/\eta)^{\beta}}{T}, \quad T^* = \eta \left(\frac{C_p}{C_f (\beta - 1)}\right)^{1/\beta}`,
      ],
      symbols: [],
      assumes: ['A patched item goes on at its age.'],
      source: 'Barlow & Hunter 1960, policy II',
      checks: [
        { id: 'minimal-repair', what: 'T*/η, β = 2.5, ratio 4', value: '0.488359', source: 'closed form' },
      ],
    },
    {
      id: 'block-replacement',
      name: 'Block replacement',
      decides: 'The price where a whole group is renewed in one visit.',
      formulas: [
        String.raw`C(T) = \frac{C_p + C_f M(T)}{T}`,
        String.raw`M(t) = F(t) + \int_0^t M(t - u)\,dF(u)`,
      ],
      symbols: [['M(T)', 'failures expected of one position until T, each renewed at once']],
      assumes: ['The renewal equation is solved numerically.'],
      source: 'Xie 1989',
      checks: [
        {
          id: 'renewal-1',
          what: 'M(1), β = 2, η = 1',
          value: '0.7537',
          source: 'numerical renewal equation',
        },
        {
          id: 'renewal-2',
          what: 'M(2), β = 2, η = 1',
          value: '1.8940',
          source: 'numerical renewal equation',
        },
      ],
    },
    {
      id: 'failure-finding',
      name: 'Failure finding',
      decides: 'How often a hidden function has to be tested. A statutory interval always comes first.',
      formulas: [String.raw`A = \frac{1 - e^{-T/\theta}}{T/\theta}, \quad T \approx 2(1 - A)\,\theta`],
      symbols: [
        ['A', 'availability the function is to have'],
        ['\\theta', 'mean time between its failures'],
      ],
      assumes: ['A constant rate, and a test that finds every failure and does no harm.'],
      source: 'Common practice of failure finding; Nowlan & Heap 1978',
      checks: [
        { id: 'finding-90', what: 'T/θ at 90 %', value: '0.214556', source: 'R uniroot' },
        { id: 'finding-99', what: 'T/θ at 99 %', value: '0.0201345', source: 'R uniroot' },
      ],
    },
    {
      id: 'draws',
      name: 'How sure: 400 draws',
      decides:
        'Share of what the records leave possible in which a change saves money; under 80 % nothing is proposed.',
      formulas: [
        String.raw`(\ln\beta,\ \ln\eta) \sim N\left((\ln\hat\beta,\ \ln\hat\eta),\ \hat\Sigma\right)`,
      ],
      symbols: [['\\hat\\Sigma', 'covariance of the fit, from the observed information']],
      assumes: ['The same quasi-random draws every night, so that advice moves only when the records do.'],
      source: 'Meeker & Escobar 1998; the sequence is Roberts 2018, after Kronecker',
      checks: [],
    },
    {
      id: 'forecast',
      name: 'Failures to come',
      decides: 'Failures to expect in 1, 3 and 12 months, with a range.',
      formulas: [String.raw`F_a(t) + \int_0^t G_a(t - u)\,dM(u)`],
      symbols: [
        ['F_a', 'chance that an item of age a fails within t'],
        ['G_a', 'chance that it has left its place by then, by failure or plan'],
        ['M', 'failures of the items that follow it'],
      ],
      assumes: [
        'By the ages in place where age matters; else at the rate of all records, or of the last year where it differs.',
        'The range mixes the scatter of such counts, by renewal theory, with what is not known of the life.',
      ],
      source: 'Cox 1962 (renewal theory); Gelman et al. 2013 (Jeffreys’ prior for a rate)',
      checks: [
        {
          id: 'forecast-new',
          what: 'a new item, β = 2, until 2η',
          value: '1.8940',
          source: 'numerical renewal equation',
        },
      ],
    },
    {
      id: 'spares',
      name: 'Spares for a lead time',
      decides: 'How many to hold.',
      formulas: [String.raw`\min \{ s : P(\text{demand} \le s) \ge \text{service level} \}`],
      symbols: [],
      assumes: ['Failures alone; planned renewals bring their parts with them.'],
      source: 'Common practice',
      checks: [{ id: 'spares', what: 'mean demand 7.5 at 95 %', value: '12', source: 'R qpois' }],
    },
    {
      id: 'two-rates',
      name: 'Before and after: two Poisson rates',
      decides: 'Whether a change helped, made no difference or made it worse.',
      formulas: [String.raw`n_1 \mid n \sim \text{Bin}\left(n,\ \frac{\rho T_1}{\rho T_1 + T_2}\right)`],
      symbols: [
        ['\\rho', 'ratio of the two rates'],
        ['T_1,\\ T_2', 'running time after and before'],
      ],
      assumes: [
        'Exact test and Clopper–Pearson interval. It knows nothing of what else changed at the same time.',
        'The same: the whole interval within 0.67 to 1.5. Too early: neither that nor clear of 1.',
      ],
      source: 'Przyborowski & Wilenski 1940; Clopper & Pearson 1934',
      checks: [
        {
          id: 'rates-ratio',
          what: '4 in 900 against 15 in 1200: ratio',
          value: '0.355556',
          source: 'R poisson.test',
        },
        { id: 'rates-p', what: 'the same: p', value: '0.0641757', source: 'R poisson.test' },
        {
          id: 'rates-low',
          what: 'the same: interval, lower end',
          value: '0.108566',
          source: 'R poisson.test',
        },
      ],
    },
  ],
};
