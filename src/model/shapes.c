/* The constants of similar sections. Second moments and section moduli are elementary (each is worked out on a section
 * of unit size below); what is said of torsion names its source. */
#include "shapes.h"

#include <math.h>

static const double PI = 3.14159265358979323846;

/* The constants of a section of area A. */
static sct_shape scaled(double A, const double I[2], const double W[2], double J)
{
    return (sct_shape){{I[0] / (A * A), I[1] / (A * A)}, {W[0] / pow(A, 1.5), W[1] / pow(A, 1.5)}, J / (A * A)};
}

/* J of a rectangle a x b, a >= b: Saint-Venant's series, as in Timoshenko and Goodier, Theory of Elasticity, 3rd ed.,
 * section 109 (for a square 0.1406 a^4). Its terms fall as n^-5: a hundred leave less than 1e-10 of the sum. */
static double rectangle_torsion(double a, double b)
{
    double sum = 0.0;
    for (int n = 199; n >= 1; n -= 2) sum += tanh(n * PI * a / (2 * b)) / pow(n, 5);
    return a * b * b * b / 3 * (1 - 192 / pow(PI, 5) * b / a * sum);
}

static sct_shape rectangle(double depth_to_width)
{
    const double h = depth_to_width, b = 1.0;
    return scaled(b * h, (double[]){b * h * h * h / 12, h * b * b * b / 12}, (double[]){b * h * h / 6, h * b * b / 6},
                  rectangle_torsion(fmax(b, h), fmin(b, h)));
}

/* Wall 1, sharp corners. Torsion: Bredt's formula for thin walls, J = 4 (area within the middle line)^2 t / its length.
 */
static sct_shape square_tube(double width_to_wall)
{
    const double b = width_to_wall, d = b - 2, middle = b - 1;
    const double I = (b * b * b * b - d * d * d * d) / 12, W = I / (b / 2);
    return scaled(b * b - d * d, (double[]){I, I}, (double[]){W, W}, middle * middle * middle);
}

/* Diameters D outside and d inside. Torsion: J = 2 I, exact for rings and discs of any wall. */
static sct_shape ring(double D, double d)
{
    const double I = PI / 64 * (D * D * D * D - d * d * d * d), W = I / (D / 2);
    return scaled(PI / 4 * (D * D - d * d), (double[]){I, I}, (double[]){W, W}, 2 * I);
}

sct_shape sct_shape_of(sct_shape_kind kind, double ratio)
{
    switch (kind) {
    case SCT_SHAPE_RECTANGLE: return rectangle(ratio);
    case SCT_SHAPE_SQUARE_TUBE: return square_tube(ratio);
    case SCT_SHAPE_ROUND_TUBE: return ring(ratio, ratio - 2);
    case SCT_SHAPE_ROUND_BAR: return ring(1.0, 0.0);
    case SCT_SHAPE_SQUARE_BAR:
    case SCT_SHAPES: break;
    }
    return rectangle(1.0);
}
