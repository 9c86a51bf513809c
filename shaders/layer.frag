#version 330 core
// Pixels of a layer, premultiplied, one to one.
uniform sampler2D pixels;
in vec2 at;
out vec4 colour;

void main()
{
    colour = texture(pixels, at);
}
