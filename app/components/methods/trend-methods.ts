import type { MethodGroup } from './method';

const nist = 'NIST/SEMATECH e-Handbook 8.2.3.4';
const valves = 'Nelson & Doganaksoy 1989; R package survival, valveSeat';

export const trendMethods: MethodGroup = {
  id: 'question-1',
  title: 'More often than before?',
  methods: [
    {
      id: 'trend-laplace',
      name: 'Laplace test',
      decides: 'Whether the trend word may say rising or falling. U above 0 means rising.',
      formulas: [
        String.raw`U = \frac{\sum_i \sum_j t_{ij} - \sum_i n_i \frac{a_i + b_i}{2}}{\sqrt{\sum_i n_i \frac{(b_i - a_i)^2}{12}}}`,
      ],
      symbols: [
        ['t_{ij}', 'time of failure j at position i, on the asset clock'],
        ['a_i,\\ b_i', 'start and end of the watch of position i'],
        ['n_i', 'failures of position i'],
      ],
      assumes: [
        'Watches were fixed beforehand; each position may have a rate of its own.',
        'U is compared with the normal distribution; over the classes of a night the p-values pass Benjamini–Hochberg at 10 %.',
      ],
      source: `Cox & Lewis 1966; Ascher & Feingold 1984; ${nist}; Benjamini & Hochberg 1995`,
      checks: [
        { id: 'laplace-repair', what: '10 repair times, window 0 to 1500', value: '-1.32695', source: nist },
        {
          id: 'laplace-growth',
          what: '27 failures, window 0 to 300',
          value: '-2.318',
          source: 'MIL-HDBK-189 (1981), Appendix C',
        },
        { id: 'laplace-valves', what: '48 valve seats on 41 engines', value: '2.378693', source: valves },
      ],
    },
    {
      id: 'military-handbook',
      name: 'Military-handbook test',
      decides: 'A second opinion on the trend, shown beside Laplace. A small X means rising.',
      formulas: [String.raw`X = 2 \sum_i \sum_j \ln \frac{b_i - a_i}{t_{ij} - a_i} \sim \chi^2_{2N}`],
      symbols: [
        ['N', 'failures in all'],
        ['t_{ij},\\ a_i,\\ b_i', 'as in the Laplace test'],
      ],
      assumes: ['Windows fixed beforehand.'],
      source: `MIL-HDBK-189; ${nist}`,
      checks: [
        {
          id: 'handbook-repair',
          what: '10 repair times (20 degrees of freedom)',
          value: '37.22808',
          source: nist,
        },
        {
          id: 'handbook-valves',
          what: '48 valve seats (96 degrees of freedom)',
          value: '66.14835',
          source: valves,
        },
      ],
    },
    {
      id: 'slope',
      name: 'Slope of the rate (Crow-AMSAA, power law)',
      decides:
        'How fast the rate rises or falls with the asset’s age; its interval decides between rising, level and unclear.',
      formulas: [
        String.raw`h(t) = \frac{\beta}{\eta} \left(\frac{t}{\eta}\right)^{\beta - 1}`,
        String.raw`\frac{n}{\hat\beta} + \sum \ln t - n\,\frac{\sum (x^{\hat\beta} \ln x - e^{\hat\beta} \ln e)}{\sum (x^{\hat\beta} - e^{\hat\beta})} = 0`,
        String.raw`\hat\eta = \left[\tfrac{1}{n} \sum (x^{\hat\beta} - e^{\hat\beta})\right]^{1/\hat\beta}`,
      ],
      symbols: [
        ['t', 'ages at failure'],
        ['e,\\ x', 'ages at which the watch of a position begins and ends'],
        ['n', 'failures'],
      ],
      assumes: [
        'The rate follows a power of age; the Cramér–von Mises test says when it does not.',
        'The interval is the 90 % profile likelihood interval; exact where all positions are watched from age 0 to one age.',
      ],
      source: 'Crow 1975 (AMSAA TR-138); MIL-HDBK-189; IEC 61164; IEC 61710',
      checks: [
        {
          id: 'slope-repair',
          what: '10 repair times: slope',
          value: '0.537229',
          source: 'NIST/SEMATECH e-Handbook 8.4.5.2',
        },
        {
          id: 'slope-repair-unbiased',
          what: '10 repair times: unbiased slope',
          value: '0.483506',
          source: 'NIST/SEMATECH e-Handbook 8.4.5.2',
        },
        {
          id: 'slope-repair-low',
          what: '10 repair times: exact interval, lower end',
          value: '0.291468',
          source: 'closed form',
        },
        {
          id: 'slope-repair-profile',
          what: '10 repair times: profile interval, upper end',
          value: '0.86708',
          source: 'profile likelihood, checked in R',
        },
        { id: 'slope-valves', what: '48 valve seats: slope', value: '1.399579', source: valves },
      ],
    },
    {
      id: 'mtbf',
      name: 'Mean time between failures',
      decides: 'The figure in the list of classes, with what the count allows.',
      formulas: [
        String.raw`\left[\frac{2T}{\chi^2_{1-\alpha/2;\,2r+2}},\ \frac{2T}{\chi^2_{\alpha/2;\,2r}}\right]`,
      ],
      symbols: [
        ['T', 'running time of all positions together'],
        ['r', 'failures; with none there is only a lower end'],
        ['\\alpha', '10 %'],
      ],
      assumes: ['A constant rate over the time looked at.'],
      source: 'Epstein & Sobel 1953; as in IEC 60605-4 (from memory)',
      checks: [
        {
          id: 'mtbf-fans-low',
          what: '12 of 70 generator fans: lower end, hours',
          value: '17715.8',
          source: 'Nelson 1982; R package survival, genfan',
        },
        {
          id: 'mtbf-fans-high',
          what: '12 of 70 generator fans: upper end, hours',
          value: '49744.3',
          source: 'Nelson 1982; R package survival, genfan',
        },
      ],
    },
    {
      id: 'mean-cumulative-function',
      name: 'Mean cumulative function',
      decides: 'How many failures a position has had on average by an age.',
      formulas: [String.raw`M(t) = \sum_{t_k \le t} \frac{d(t_k)}{m(t_k)}`],
      symbols: [
        ['d(t_k)', 'failures at age t_k'],
        ['m(t_k)', 'positions under watch at that age'],
      ],
      assumes: [
        'Positions behave alike; the band is that of Lawless & Nadeau, which lets each position have its own failures together.',
      ],
      source: 'Nelson 2003; Lawless & Nadeau 1995',
      checks: [
        {
          id: 'mcf-valves-326',
          what: 'valve seats at 326 days, all 48 counted',
          value: '0.51220',
          source: 'valveSeat of R survival, by the definition of Nelson 2003',
        },
        {
          id: 'mcf-valves-653',
          what: 'valve seats at 653 days, all 48 counted',
          value: '1.54269',
          source: 'valveSeat of R survival, by the definition of Nelson 2003',
        },
      ],
    },
    {
      id: 'trend-alarm',
      name: 'Trend alarm',
      decides: 'Whether an alarm is raised although somebody looks every night.',
      formulas: [
        String.raw`V_k = k \ln \frac{s_{k+1}}{s_k}, \quad S = \sum_{k=1}^{n-1} V_k`,
        String.raw`E = \frac{1}{4} \sum_{\beta} \beta^{n-1} e^{-(\beta - 1) S}, \quad \beta \in \{1.2,\ 1.5,\ 2,\ 3\}`,
      ],
      symbols: [
        ['s_k', 'running time of all positions together until failure k'],
        ['E', 'evidence; raised at 20 or more, and cleared only by a person'],
      ],
      assumes: [
        'At a constant rate the chance that E ever reaches 20 is at most 5 %, however often one looks (Ville’s inequality).',
        'A falling rate is watched for with the inverse slopes. Over all classes alarms pass e-BH at 5 %.',
      ],
      source: 'Ville 1939; Ramdas, Grünwald, Vovk & Shafer 2023; Wang & Ramdas 2022 (e-BH)',
      checks: [
        {
          id: 'alarm-sum',
          what: '12 failures of a worked set: S',
          value: '3.974692',
          source: 'computed from the formula with numpy',
        },
        {
          id: 'alarm-rising',
          what: 'the same: E rising',
          value: '29.0485',
          source: 'computed from the formula with numpy',
        },
        {
          id: 'alarm-falling',
          what: 'the same: E falling',
          value: '0.0770427',
          source: 'computed from the formula with numpy',
        },
      ],
    },
  ],
};
