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
uniform float side;       // 1: what shows its reflecting side, -1: backs, 0: as it faces
uniform sampler2D shadows;
in float facing;
in vec2 on_aperture;
in vec2 on_lines;
in float error;
out vec4 colour;

void main()
{
    if ((side != 0.0 ? side : facing) < 0.0) {
        float stripe = mod(gl_FragCoord.x + gl_FragCoord.y, max(hatch_step, 1.0) * 1.414);
        float line = clamp(1.1 - abs(stripe - 1.0), 0.0, 1.0) * 0.55 * step(1e-3, hatch_step);
        colour = vec4(mix(back, ink, line), 1.0) * opacity;
        return;
    }
    vec2 per_pixel = fwidth(on_lines);
    vec2 away = abs(on_lines - floor(on_lines + 0.5)) / per_pixel;
    vec2 lines = clamp(0.9 - away, 0.0, 1.0) * clamp(2.0 - 4.0 * per_pixel, 0.0, 1.0);
    float dark = max(grid * max(lines.x, lines.y), shade * texture(shadows, on_aperture).r);
    vec3 base = mix(back, fill, 0.55 + 0.45 * max(facing, 0.0));
    colour = vec4(mix(base, ink, dark), 1.0) * opacity;
}
