/* Used by property tests and benchmarks. */
#include "random.h"

#include <math.h>

ev_random ev_random_seeded(uint64_t seed)
{
    uint64_t z = seed + 0x9e3779b97f4a7c15u;
    z = (z ^ (z >> 30)) * 0xbf58476d1ce4e5b9u;
    z = (z ^ (z >> 27)) * 0x94d049bb133111ebu;
    z ^= z >> 31;
    return (ev_random){z ? z : 1u};
}

double ev_random_unit(ev_random *random)
{
    uint64_t x = random->state;
    x ^= x >> 12;
    x ^= x << 25;
    x ^= x >> 27;
    random->state = x;
    return (double)((x * 0x2545f4914f6cdd1du) >> 11) * 0x1p-53;
}

double ev_random_between(ev_random *random, double low, double high)
{
    return low + (high - low) * ev_random_unit(random);
}

double ev_random_log(ev_random *random, double low, double high)
{
    return low * pow(high / low, ev_random_unit(random));
}

int ev_random_pick(ev_random *random, int count)
{
    return (int)(ev_random_unit(random) * count);
}

int ev_random_chance(ev_random *random, double probability)
{
    return ev_random_unit(random) < probability;
}
