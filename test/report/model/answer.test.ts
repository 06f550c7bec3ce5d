import { describe, expect, it } from 'vitest';
import { answerOf } from '../../../src/report/model/answer.ts';
import { viewOf } from '../../../src/report/model/view.ts';
import { type FixtureWish, fixtureResult } from '../fixture.ts';

const answer = (wish: FixtureWish) => answerOf(viewOf(fixtureResult({ lengthKm: 12, ...wish }), 'kmh'));
/** Spaces that must not break are spaces to a reader. */
const plain = (text: string) => text.replace(/\u00a0/g, ' ');

describe('the answer', () => {
  it('names the better design, its share of the holdable road, what defeats it and the locked throttle', () => {
    const { sentence, design, standing, designs } = answer({ lengthKm: 28 });
    expect(design).toBe('pi-firm');
    expect(standing).toBe('not met');
    const words = plain(sentence);
    expect(words).toContain(
      'pi-firm holds 60 km/h within ±2 km/h for 99.3 % of the time on the holdable road',
    );
    expect(words).toContain('misses 1 of 2 requirements (SH-02)');
    expect(words).toMatch(
      /hill \d+ \(km \d+\.\d\d to \d+\.\d\d, mean grade .+ %\) defeats it: it (loses|gains) \d+\.\d km\/h because/,
    );
    expect(words).toMatch(
      /a throttle locked in place strays from \d+ km\/h below the set speed to \d+ km\/h above it\.$/,
    );
    expect(designs.map(({ name, words }) => `${name}: ${words}`)).toEqual([
      'pi-firm: 1 of 2 not met',
      'pi-soft: 2 of 2 not met',
    ]);
  });

  it('says when all is met, when it is too close to call, and when nothing was asked', () => {
    expect(answer({ requirements: 'met' })).toMatchObject({ standing: 'met' });
    expect(answer({ requirements: 'met' }).sentence).toContain('meets both requirements');
    expect(answer({ requirements: 'close' })).toMatchObject({ standing: 'too close to call' });
    expect(answer({ requirements: 'close' }).sentence).toContain('SH-01 is too close to call');
    expect(answer({ requirements: 'none' })).toMatchObject({ standing: 'none asked' });
    expect(answer({ requirements: 'none' }).sentence).not.toContain('requirement');
  });

  it('is no green light where a requirement cannot be judged', () => {
    const base = fixtureResult({ lengthKm: 12, requirements: 'met', designs: ['pi-firm'] });
    const none = { none: 'no part of the road is holdable' };
    const [first, ...rest] = base.requirements;
    const unjudged = { ...first!, measured: none, margin: none, verdict: 'not judged' as const };
    const { sentence, standing, designs } = answerOf(
      viewOf({ ...base, requirements: [unjudged, ...rest] }, 'kmh'),
    );
    expect(standing).toBe('not judged');
    expect(plain(sentence)).toContain('misses no requirement, but SH-01 cannot be judged on this road');
    expect(designs[0]!.words).toBe('1 of 2 not judged');
  });

  it('names the limit cycle of another design where its own loop is steady, the greatest first', () => {
    const base = fixtureResult({
      lengthKm: 12,
      requirements: 'met',
      designs: ['pi-firm', 'pi-soft', 'pi-slow'],
    });
    const cycle = (candidate: string, speedAmplitude: number, from: number) => ({
      candidate,
      from,
      to: from + 1500,
      period: 2.5,
      turns: 40,
      speedAmplitude,
      throttleAmplitude: 0.04,
      cause: 'fuel_cut' as const,
      why: '',
    });
    const told = (cycles: typeof base.cycles): string =>
      plain(answerOf(viewOf({ ...base, cycles }, 'kmh')).sentence);
    const best = answerOf(viewOf(base, 'kmh')).design!;
    const [second, third] = ['pi-firm', 'pi-soft', 'pi-slow'].filter((name) => name !== best);
    expect(told([])).not.toContain('swings');
    // 0.25 m/s are 0.90 km/h.
    expect(told([cycle(second!, 0.1, 1000), cycle(third!, 0.25, 4000), cycle(third!, 0.2, 7000)])).toContain(
      `${third} swings by itself on km 4.00 to 5.50 (and once elsewhere): ±0.90 km/h every 2.5 s, because of the step of the fuel cut`,
    );
    // Its own come first, however small.
    expect(told([cycle(second!, 0.25, 1000), cycle(best, 0.1, 4000)])).toContain(
      'it swings by itself on km 4.00 to 5.50: ±0.36 km/h every 2.5 s',
    );
  });

  it('crowns no design whose linear loop is unstable before a stable one, and says so where it has no other', () => {
    const shaky = (names: readonly string[], wish: FixtureWish): ReturnType<typeof answerOf> => {
      const base = fixtureResult({ lengthKm: 12, ...wish });
      const candidates = base.candidates.map((one) =>
        names.includes(one.name) && one.loop !== null
          ? { ...one, loop: { ...one.loop, stable: false, gainMargin: null, phaseMargin: null } }
          : one,
      );
      return answerOf(viewOf({ ...base, candidates }, 'kmh'));
    };
    const first = answer({ requirements: 'met' }).design!;
    const other = shaky([first], { requirements: 'met' });
    expect(other.design).not.toBe(first);
    expect(other.designs.find(({ name }) => name === first)).toMatchObject({
      standing: 'unstable',
      words: 'both met; its linear loop is unstable',
    });
    const alone = shaky(['pi-firm'], { requirements: 'met', designs: ['pi-firm'] });
    expect(alone.standing).toBe('unstable');
    expect(alone.sentence).toContain('its linear loop is unstable, so that it swings on any road');
    expect(shaky(['pi-firm'], { designs: ['pi-firm'], lengthKm: 28 }).standing).toBe('not met');
    expect(alone.design).toBe('pi-firm');
  });

  it('says nothing of the holdable road where all figures are of the whole road', () => {
    const base = fixtureResult({ lengthKm: 28, requirements: 'met', designs: ['pi-firm'] });
    const told = (figure: string) =>
      plain(
        answerOf(
          viewOf(
            {
              ...base,
              demand: { ...base.demand, holdableShare: 0.98 },
              requirements: base.requirements.map((one) => ({
                ...one,
                requirement: { ...one.requirement, figure, where: 'holdable' as const },
              })),
            },
            'kmh',
          ),
        ).sentence,
      );
    expect(told('rms_error_kmh')).toContain('on the holdable 98 % of the road');
    expect(told('hold_off_events')).not.toContain('98 % of the road');
  });

  it('says the holdable road only of the requirements that are taken over it', () => {
    const base = fixtureResult({ lengthKm: 28, requirements: 'met', designs: ['pi-firm'] });
    const figures = ['within_band_pct', 'hold_off_events'];
    const requirements = base.requirements.map((one, i) => ({
      ...one,
      requirement: { ...one.requirement, figure: figures[i]!, where: 'holdable' as const },
    }));
    const hills = base.hills.map((hill) => ({
      ...hill,
      share: 1.2,
      outcomes: hill.outcomes.map((one) => ({ ...one, affected: true, speedChange: -5 })),
    }));
    const demand = { ...base.demand, holdableShare: 0.742 };
    const { sentence, designs } = answerOf(viewOf({ ...base, hills, demand, requirements }, 'kmh'));
    expect(plain(sentence)).toContain(
      'and meets both requirements, one of them on the holdable 74 % of the road',
    );
    expect(designs[0]!.words).toBe('both met, one of them where it can be held');
  });

  it('names a speed only where hold keeps the one of the case', () => {
    const base = fixtureResult({ lengthKm: 12, designs: ['pi-firm'] });
    const told = (hold: Partial<typeof base.hold>, kind?: 'engaged' | 'tapped', setSpeed = 50 / 3.6) => {
      const event = {
        time: 60,
        distance: 1000,
        cause: 'rider',
        setSpeed,
        measured: setSpeed,
        command: 0.2,
      } as const;
      const candidates = base.candidates.map((one) => ({
        ...one,
        result: { ...one.result, holdEvents: kind === undefined ? [] : [{ ...event, kind }] },
      }));
      return answerOf(
        viewOf({ ...base, candidates, hold: { ...base.hold, ...hold } }, 'kmh'),
      ).sentence.replace(/\u00a0/g, ' ');
    };
    expect(told({})).toContain('holds 60 km/h within');
    expect(told({ starts: 'by_hand' }, 'engaged')).toContain('holds the set speed within');
    expect(told({}, 'engaged')).toContain('holds its set speeds within');
    expect(told({}, 'tapped')).toContain('holds its set speeds within');
    expect(told({}, 'engaged', base.hold.setSpeed)).toContain('holds 60 km/h within');
  });

  it('is no green light where requirements were asked of the holdable road alone and that is not all of it', () => {
    const base = fixtureResult({ lengthKm: 28, requirements: 'met', designs: ['pi-firm'] });
    const hillsOf = (share: number) =>
      base.hills.map((hill) => ({
        ...hill,
        share,
        outcomes: hill.outcomes.map((one) => ({ ...one, affected: true, speedChange: -5 })),
      }));
    const told = (where: 'holdable' | 'all', holdableShare: number, share = 1.2) =>
      answerOf(
        viewOf(
          {
            ...base,
            hills: hillsOf(share),
            demand: { ...base.demand, holdableShare },
            requirements: base.requirements.map((one, i) => ({
              ...one,
              requirement: { ...one.requirement, where: i === 0 ? ('holdable' as const) : where },
            })),
          },
          'kmh',
        ),
      );
    const part = told('holdable', 0.742);
    expect(part.standing).toBe('met in part');
    expect(plain(part.sentence)).toContain('and meets both requirements on the holdable 74 % of the road');
    expect(part.designs[0]!.words).toBe('both met where it can be held');
    // Where no hill is beyond the drive the road is told, and the light is green.
    expect(told('holdable', 0.98, 0.9).standing).toBe('met');
    expect(plain(told('holdable', 0.98, 0.9).sentence)).toContain('on the holdable 98 % of the road');
    expect(told('holdable', 1).standing).toBe('met');
    expect(told('all', 0.742).standing).toBe('met');
  });

  it('says that a hill defeats a design only where the demand leaves the range of the drive', () => {
    const base = fixtureResult({ lengthKm: 28 });
    const within = base.hills.map((hill) => ({ ...hill, share: 0.9, kind: 'level' as const }));
    const beyond = base.hills.map((hill) => ({ ...hill, share: -1.2, kind: 'descent' as const }));
    const told = (hills: typeof base.hills) => plain(answerOf(viewOf({ ...base, hills }, 'kmh')).sentence);
    expect(told(within)).toMatch(/stretch \d+ \(.*\) takes it out of its band: it/);
    expect(told(beyond)).toMatch(/hill \d+ \(.*\) defeats it: it/);
  });

  it('says when a run ended early: of the design, of another one, of the locked throttle', () => {
    const own = answer({
      designs: ['pi-only'],
      ends: { 'pi-only': { km: 5, status: 'stalled' }, locked: { km: 4, status: 'stopped' } },
    });
    expect(own.standing).toBe('incomplete');
    expect(plain(own.sentence)).toMatch(
      /^pi-only stalled at km (4\.99|5\.\d\d) and does not finish the road/,
    );
    expect(plain(own.sentence)).toMatch(/a throttle locked in place came to a stop at km (3\.99|4\.\d\d)\.$/);
    const other = answer({ ends: { 'pi-soft': { km: 5, status: 'time_limit' } } });
    expect(other.design).toBe('pi-firm');
    expect(plain(other.sentence)).toContain('pi-soft ran out of time at km');
  });

  it('speaks of the locked throttle alone where there is no design, and of designs alone where none is locked', () => {
    const locked = answer({ designs: [], requirements: 'none' });
    expect(locked.design).toBeNull();
    expect(locked.sentence).toMatch(
      /^The throttle locked in place strays .* no design was replayed beside it\.$/,
    );
    expect(answer({ locked: false }).sentence).not.toContain('locked');
  });

  it('is one sentence', () => {
    for (const wish of [{}, { requirements: 'none' }, { designs: [] }, { locked: false }] as const) {
      const { sentence } = answer(wish);
      expect(sentence.endsWith('.')).toBe(true);
      expect(sentence.slice(0, -1)).not.toMatch(/\.\s/);
    }
  });
});
