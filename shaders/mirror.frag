#version 330 core
// Reflectors and horns: even fill with a fine polar grid on the side that reflects, hatching of
// technical drawing on the back. Shadows lie on the dish where they fall in the aperture.
uniform vec3 fill;
uniform vec3 back;
uniform vec3 ink;
uniform float opacity;
uniform float grid;       // strength of the polar grid, 0 for none
uniform float hatch_step; // device pixels; 0: no hatching on the back
uniform float shade;      // strength of the shadows, 0 for none
uniform sampler2D shadows;
in float facing;
in vec2 on_aperture;
in float error;
out vec4 colour;

// Coverage of a line of `width` pixels where `x` is whole.
float rule(float x, float width)
{
    float per_pixel = max(fwidth(x), 1e-6);
    float away = abs(x - floor(x + 0.5)) / per_pixel;
    return clamp(0.5 * width + 0.5 - away, 0.0, 1.0) * clamp(2.0 - 4.0 * per_pixel, 0.0, 1.0);
}

float polar_grid(vec2 at)
{
    float r = length(at);
    float turn = atan(at.y, at.x) / 6.2831853;
    // the angle jumps where it wraps: take the smoother of two cuts
    float other = fract(turn + 0.5) - 0.5;
    float spokes = fwidth(turn) < fwidth(other) ? rule(24.0 * turn, 0.8) : rule(24.0 * other, 0.8);
    return max(rule(6.0 * r, 0.8), spokes * step(0.02, r));
}

void main()
{
    if (facing < 0.0) {
        float stripe = hatch_step > 0.0 ? mod(gl_FragCoord.x + gl_FragCoord.y, hatch_step * 1.414) : 9.0;
        float line = clamp(1.1 - abs(stripe - 1.0), 0.0, 1.0) * 0.55 * step(1e-3, hatch_step);
        colour = vec4(mix(back, ink, line), 1.0) * opacity;
        return;
    }
    float light = 0.55 + 0.45 * facing;
    vec3 base = mix(back, fill, light);
    base = mix(base, ink, grid * polar_grid(on_aperture));
    base = mix(base, ink, shade * texture(shadows, 0.5 * on_aperture + 0.5).r);
    colour = vec4(base, 1.0) * opacity;
}
