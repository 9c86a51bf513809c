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
in vec2 on_lines;
in float error;
out vec4 colour;

void main()
{
    float strength = min(abs(error), 1.0);
    vec3 base = mix(ground, error < 0.0 ? early : late, 0.85 * strength);
    vec2 per_pixel = fwidth(on_lines);
    vec2 away = abs(on_lines - floor(on_lines + 0.5)) / per_pixel;
    vec2 lines = clamp(0.85 - away, 0.0, 1.0) * clamp(2.0 - 4.0 * per_pixel, 0.0, 1.0);
    base = mix(base, ink, 0.16 * max(lines.x, lines.y));
    float lit = 1.0 - 0.85 * texture(shadows, on_aperture).r;
    colour = vec4(base, 1.0) * (opacity * lit * (0.72 + 0.28 * strength));
}
