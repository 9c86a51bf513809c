/* Scattered pedestal; formula in the header. Called where a cut or map is shown with it. */
#include "optics/beam_pedestal.h"

#include "base/vec3.h"

/* exp(-d^2) d^2n / n! is a Poisson probability: n runs over where it is not negligible. */
double ev_pedestal_gain(const ev_pedestal *pedestal, double theta)
{
    double d = 4.0 * EV_PI * pedestal->rms / pedestal->wavelength, mean = d * d;
    double reach = EV_PI * pedestal->correlation / pedestal->wavelength;
    double narrow = reach * sin(theta), sum = 0.0;
    if (!(mean > 0.0) || !(reach > 0.0))
        return 0.0;
    double spread = 12.0 * (sqrt(mean) + 2.0);
    double from = floor(fmax(1.0, mean - spread)), to = ceil(mean + spread);
    for (double n = from; n <= to; n += 1.0) {
        double share = exp(n * log(mean) - mean - lgamma(n + 1.0));
        sum += share / n * exp(-narrow * narrow / n);
    }
    return pedestal->power * 4.0 * reach * reach * sum;
}

double ev_pedestal_add_dbi(const ev_pedestal *pedestal, double theta, double level_dbi)
{
    return 10.0 * log10(pow(10.0, 0.1 * level_dbi) + ev_pedestal_gain(pedestal, theta));
}
