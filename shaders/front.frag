#version 330 core
// The Front: a translucent sheet, early and late in their colours through the ground, with rings
// and spokes of its own, and holes where the aperture is in shadow.
uniform vec3 ground;
uniform vec3 ink;
uniform vec3 early;
uniform vec3 late;
uniform float opacity;
uniform sampler2D shadows;
in float facing;
in vec2 on_aperture;
in float error;
out vec4 colour;

float rule(float x, float width)
{
    float per_pixel = max(fwidth(x), 1e-6);
    float away = abs(x - floor(x + 0.5)) / per_pixel;
    return clamp(0.5 * width + 0.5 - away, 0.0, 1.0) * clamp(2.0 - 4.0 * per_pixel, 0.0, 1.0);
}

void main()
{
    float strength = clamp(abs(error), 0.0, 1.0);
    vec3 base = mix(ground, error < 0.0 ? early : late, 0.85 * strength);
    float r = length(on_aperture);
    float turn = atan(on_aperture.y, on_aperture.x) / 6.2831853;
    float other = fract(turn + 0.5) - 0.5;
    float spokes = fwidth(turn) < fwidth(other) ? rule(24.0 * turn, 0.7) : rule(24.0 * other, 0.7);
    base = mix(base, ink, 0.16 * max(rule(8.0 * r, 0.7), spokes * step(0.02, r)));
    float lit = 1.0 - 0.85 * texture(shadows, 0.5 * on_aperture + 0.5).r;
    colour = vec4(base, 1.0) * (opacity * lit * (0.72 + 0.28 * strength));
}
