#version 330 core
// A flat layer of the page as one quad; corners from the vertex number, no buffer.
uniform vec4 place; // clip space: left, top, right, bottom
out vec2 at;

void main()
{
    vec2 corner = vec2(gl_VertexID & 1, gl_VertexID >> 1);
    at = corner;
    gl_Position = vec4(mix(place.xy, place.zw, corner), 0.0, 1.0);
}
