#version 330 core
// A curved surface: reflector, horn or Front. Coordinates are metres from the mesh's origin.
layout(location = 0) in vec3 position;
layout(location = 1) in vec3 normal;
layout(location = 2) in vec2 aperture;
layout(location = 3) in vec2 polar;
layout(location = 4) in float value;
uniform mat4 clip;
uniform vec3 eye;
uniform vec2 polar_lines; // rings and spokes: a line where a coordinate is whole
out float facing;         // cosine between the normal and the line of sight
out vec2 on_aperture;
out vec2 on_lines;
out float error;

void main()
{
    facing = dot(normalize(eye - position), normal);
    on_aperture = 0.5 * aperture + 0.5;
    on_lines = polar_lines * polar;
    error = value;
    gl_Position = clip * vec4(position, 1.0);
}
