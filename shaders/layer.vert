#version 330 core
// A part of a texture as one quad on the page; corners from the vertex number, no buffer.
uniform vec4 place; // clip space: left, top, right, bottom
uniform vec4 part;  // texture coordinates, likewise
out vec2 at;

void main()
{
    vec2 corner = vec2(gl_VertexID & 1, gl_VertexID >> 1);
    at = mix(part.xy, part.zw, corner);
    gl_Position = vec4(mix(place.xy, place.zw, corner), 0.0, 1.0);
}
