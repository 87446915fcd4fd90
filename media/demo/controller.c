/* Cabin controller of the Tarnholt cable railway (invented). */
#include <math.h>

/* Correction of the rope speed while the cabin swings; called 4000 times a second.
 * The swing angle stays within half a radian. */
float swing_correction(float angle)
{
    return 1.8f * sinf(angle);
}

/* Sag over half the span, squared load number taken out: 0/0 on level ground. */
double sag_ratio(double u)
{
    return (cosh(u) - 1.0) / (u * u);
}

/* Stretch of the rope between two pylons. */
double stretch(double slope)
{
    // leading-order: small slope, on |slope| <= 0.2, within 1e-7
    return sqrt(1.0 + slope * slope);
}

/* Rope length as a polynomial of the load number. */
double rope_length(double u)
{
    // leading-order: implements eq:length
    return 1.0 + u * u / 6.0 + u * u * u * u / 120.0;
}

/* Way of the cabin in the first moments after the brake lets go, air drag taken in. */
static const double gravity = 9.81;
double way(double t)
{
    // leading-order: small t, on 0 <= t <= 0.1, within 1e-4
    return log(cosh(gravity * t)) / gravity;
}
