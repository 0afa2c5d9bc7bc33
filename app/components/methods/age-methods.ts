import type { MethodGroup } from './method';

const fans = 'Nelson 1982; R package survival, genfan, survreg';

export const ageMethods: MethodGroup = {
  id: 'question-2',
  title: 'Do the old ones go first?',
  methods: [
    {
      id: 'life-fit',
      name: 'Life (Weibull)',
      decides: 'Shape β and its interval give the verdict; mean life and B10 follow from them.',
      formulas: [
        String.raw`R(t) = \exp\left[-\left(\frac{t}{\eta}\right)^{\beta}\right]`,
        String.raw`\text{MTTF} = \eta\,\Gamma\left(1 + \tfrac{1}{\beta}\right), \quad B_{10} = \eta\,(-\ln 0.9)^{1/\beta}`,
      ],
      symbols: [
        ['\\beta', 'shape: above 1 wears out, 1 is memoryless, below 1 fails young'],
        ['\\eta', 'scale: age by which 63 % have failed'],
      ],
      assumes: [
        'Maximum likelihood with planned renewals as censoring and items of known age from the day they were watched (late entry).',
        'A memoryless item has failed by its MTTF with a chance of 63 %, not 50 % (common practice to warn of this).',
        'β̂ is biased high when failures are few: n stands beside it.',
      ],
      source: 'Nelson 1982; Meeker & Escobar 1998; IEC 61649',
      checks: [
        { id: 'life-fans-shape', what: '12 of 70 generator fans: β', value: '1.05845', source: fans },
        { id: 'life-fans-scale', what: '12 of 70 generator fans: η, hours', value: '26296.8', source: fans },
        {
          id: 'life-fans-low',
          what: '12 of 70 generator fans: profile interval, lower end',
          value: '0.66886',
          source: fans,
        },
        {
          id: 'life-fans-high',
          what: '12 of 70 generator fans: profile interval, upper end',
          value: '1.55157',
          source: fans,
        },
        {
          id: 'life-test',
          what: '10 of 20 failed by 500 h: β',
          value: '1.720797',
          source: 'NIST/SEMATECH e-Handbook 8.4.1.3; survreg',
        },
        {
          id: 'life-late',
          what: '6 of 24 with late entries: β',
          value: '3.711259',
          source: 'R nlm on the likelihood',
        },
      ],
    },
    {
      id: 'likelihood-ratio',
      name: 'Likelihood-ratio test of β = 1',
      decides: 'Its one-sided p goes into the control of false wear-out over all classes.',
      formulas: [
        String.raw`\text{LR} = 2\,(\ln L(\hat\beta, \hat\eta) - \ln L(1, \hat\theta)) \sim \chi^2_1`,
      ],
      symbols: [['\\hat\\theta', 'mean life of the exponential fit: exposure over failures']],
      assumes: [
        'Enough failures for the chi-squared approximation; below 20 the screen says that it is rough.',
      ],
      source: 'Nelson 1982; Meeker & Escobar 1998',
      checks: [
        { id: 'ratio-fans', what: '12 of 70 generator fans', value: '0.0490', source: fans },
        {
          id: 'ratio-air',
          what: '12 air-conditioning intervals',
          value: '1.15264',
          source: 'Proschan 1963; R package boot, aircondit',
        },
      ],
    },
    {
      id: 'age-rank',
      name: 'Age-rank test and strip',
      decides: 'Whether the failed one was older than its peers, without any model of the life.',
      formulas: [
        String.raw`r = \frac{\#\text{younger} + \tfrac{1}{2}\,\#\text{as old}}{m}, \quad z = \frac{\sum (r - \tfrac{1}{2})}{\sqrt{\sum v}}`,
      ],
      symbols: [
        ['m', 'positions under watch at that moment, the failed one among them'],
        ['v', 'variance of the m ranks at that moment; 0 where all are as old'],
      ],
      assumes: ['Whatever changes the rate of the whole class at once cancels: it needs no steady use.'],
      source: 'A rank score test of Intervale’s own, cf. the Cox partial likelihood (Cox 1972)',
      checks: [],
    },
    {
      id: 'age-alarm',
      name: 'Age alarm',
      decides:
        'Whether an alarm is raised that the old, or the young, fail first although somebody looks every night.',
      formulas: [
        String.raw`E = \frac{1}{4} \sum_{\beta} \prod_f \frac{a_f^{\beta-1}}{\frac{1}{m} \sum_{j} a_j^{\beta-1}}, \quad \beta \in \{1.25,\ 1.5,\ 2,\ 3\}`,
      ],
      symbols: [
        ['a_f', 'age of the failed item'],
        ['a_j', 'ages of the m under watch at that moment'],
      ],
      assumes: ['As the trend alarm; the young are watched for with the inverse shapes.'],
      source: 'Ville 1939; Ramdas, Grünwald, Vovk & Shafer 2023; the bet is Intervale’s own',
      checks: [],
    },
    {
      id: 'nelson-aalen',
      name: 'Nelson–Aalen cumulative hazard',
      decides: 'The curve of failures by age that no model bends.',
      formulas: [String.raw`\hat H(t) = \sum_{t_k \le t} \frac{d_k}{m_k}`],
      symbols: [
        ['d_k', 'failures at age t_k'],
        ['m_k', 'items under watch at that age'],
      ],
      assumes: ['Items behave alike; entries and exits are taken in.'],
      source: 'Nelson 1972; Aalen 1978',
      checks: [],
    },
    {
      id: 'hazard-bands',
      name: 'Hazard by age band',
      decides: 'The bars beside the fitted curve: where the curve leaves them, it is wrong.',
      formulas: [
        String.raw`\hat h = \frac{d}{T}, \quad \left[\frac{\chi^2_{0.05;\,2d}}{2T},\ \frac{\chi^2_{0.95;\,2d+2}}{2T}\right]`,
      ],
      symbols: [
        ['d', 'failures in the band, at least 5'],
        ['T', 'running time in the band'],
      ],
      assumes: ['Exact Poisson limits: they hold at least what they say.'],
      source: 'Garwood 1936',
      checks: [],
    },
    {
      id: 'verdict',
      name: 'Verdict',
      decides:
        'wear-out: the 90 % interval of β lies above 1 and the test holds up among all classes. memoryless: it holds 1 and ends at 1.5 or below. early-life: it lies below 1. undecided: anything else, or under 5 failures.',
      formulas: [],
      symbols: [],
      assumes: [
        '“Not significant” alone is never called memoryless.',
        'How many more failures would settle it: standard error of ln β scaled by the root of n, 0.78/√n before there is a fit.',
      ],
      source: 'Intervale’s own rule; Benjamini & Hochberg 1995 over the classes of the night',
      checks: [],
    },
    {
      id: 'masking',
      name: 'Masking by the schedule',
      decides: 'Whether the records can say anything of ages beyond today’s interval.',
      formulas: [],
      symbols: [],
      assumes: [
        'Where at least half of all lives end by plan and under 5 % of the exposure lies beyond, a constant hazard is “memoryless up to” that age; a longer interval is tried on a part first (age exploration).',
      ],
      source: 'Nowlan & Heap 1978',
      checks: [],
    },
    {
      id: 'scatter',
      name: 'Few bad positions',
      decides: 'Whether some positions fail more often than the class can explain.',
      formulas: [String.raw`X^2 = \sum_i \frac{(n_i - e_i)^2}{e_i}`],
      symbols: [
        ['n_i', 'failures of position i'],
        ['e_i', 'its share of all failures by running time'],
      ],
      assumes: ['Given the total, counts are multinomial; p by the moments of Haldane 1937.'],
      source: 'Haldane 1937; common practice',
      checks: [
        {
          id: 'dispersion',
          what: '10 positions, one of them bad',
          value: '32.66667',
          source: 'R chisq.test',
        },
      ],
    },
    {
      id: 'same-cause',
      name: 'Same cause',
      decides: 'Whether failures of one day belong together.',
      formulas: [],
      symbols: [],
      assumes: [
        'Three or more failures on one day, of the class or at one site, rarer than 1 % over all days against Poisson scatter at the class’s rate.',
      ],
      source: 'Common practice, no source for the figures',
      checks: [],
    },
  ],
};
