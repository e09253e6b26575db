// Writes the .exr files of this folder with OpenEXR 3.1.5; README.md says how.
#include <OpenEXR/ImfChannelList.h>
#include <OpenEXR/ImfDeepFrameBuffer.h>
#include <OpenEXR/ImfDeepScanLineOutputFile.h>
#include <OpenEXR/ImfFrameBuffer.h>
#include <OpenEXR/ImfMultiPartOutputFile.h>
#include <OpenEXR/ImfOutputFile.h>
#include <OpenEXR/ImfOutputPart.h>
#include <OpenEXR/ImfPartType.h>
#include <OpenEXR/ImfRgbaFile.h>
#include <OpenEXR/ImfStandardAttributes.h>
#include <OpenEXR/ImfTiledOutputFile.h>
#include <string>
#include <vector>

using namespace Imf;
using namespace Imath;
using std::string;
using std::vector;

static string folder;

// smooth and noise are repeated in exrlibrary_test.go.
static float smooth(int c, int x, int y) {
    return float(((c + 1) * (x * x + 3 * y * y) / 16) % 2048) * 0.25f;
}

static uint32_t noise(int x, int y) {
    uint32_t h = uint32_t(x) * 0x9E3779B1u ^ uint32_t(y) * 0x85EBCA77u;
    h ^= h >> 15;
    h *= 0x2C1B3C6Du;
    h ^= h >> 12;
    h *= 0x297A2D39u;
    return h ^ h >> 15;
}

// rgb writes smooth in R, G and B, and an A that is 0 in every fifth column.
static void rgb(const char *name, Compression compression, PixelType type, Box2i display, Box2i data, LineOrder order, bool described) {
    const char *names[4] = {"R", "G", "B", "A"};
    Header header(display, data, 1, V2f(0, 0), 1, order, compression);
    for (auto n : names) header.channels().insert(n, Channel(type));
    if (described) {
        addWhiteLuminance(header, 200.f);
        addCapDate(header, "2026:06:21 14:30:00");
        addUtcOffset(header, -7200.f);
        addLatitude(header, 52.3676f);
        addLongitude(header, 4.9041f);
        addComments(header, "made by the library");
    }
    int w = data.max.x - data.min.x + 1, h = data.max.y - data.min.y + 1;
    vector<float> floats(w * h * 4);
    vector<half> halves(w * h * 4);
    FrameBuffer buffer;
    for (int c = 0; c < 4; c++) {
        for (int y = 0; y < h; y++)
            for (int x = 0; x < w; x++) {
                int dx = x + data.min.x, dy = y + data.min.y;
                float v = c < 3 ? smooth(c, dx, dy) : (dx % 5 == 0 ? 0.f : 1.f);
                floats[(c * h + y) * w + x] = v;
                halves[(c * h + y) * w + x] = half(v);
            }
        long origin = long(c) * h * w - long(data.min.y) * w - data.min.x;
        if (type == FLOAT)
            buffer.insert(names[c], Slice(FLOAT, (char *)(floats.data() + origin), 4, 4 * w));
        else
            buffer.insert(names[c], Slice(HALF, (char *)(halves.data() + origin), 2, 2 * w));
    }
    OutputFile out((folder + name).c_str(), header);
    out.setFrameBuffer(buffer);
    out.writePixels(h);
}

// y writes one channel Y: smooth times 1000.25 as floats, or integers: 'n'
// noise, which does not compress, 'r' a ramp of more than 2^14 values with
// some noise, 'c' the constant 7.
static void y(const char *name, PixelType type, int w, int h, char kind) {
    Header header(w, h, 1, V2f(0, 0), 1, INCREASING_Y, PIZ_COMPRESSION);
    header.channels().insert("Y", Channel(type));
    vector<float> floats(w * h);
    vector<uint32_t> integers(w * h);
    for (int r = 0; r < h; r++)
        for (int x = 0; x < w; x++) {
            floats[r * w + x] = smooth(0, x, r) * 1000.25f;
            integers[r * w + x] = kind == 'n' ? noise(x, r) : kind == 'r' ? uint32_t(x + w * r) ^ (noise(x, r) & 7) : 7u;
        }
    FrameBuffer buffer;
    char *base = type == FLOAT ? (char *)floats.data() : (char *)integers.data();
    buffer.insert("Y", Slice(type, base, 4, 4 * w));
    OutputFile out((folder + name).c_str(), header);
    out.setFrameBuffer(buffer);
    out.writePixels(h);
}

// yc writes luminance with chroma at half resolution.
static void yc() {
    int w = 38, h = 46;
    RgbaOutputFile out((folder + "yc_half_piz.exr").c_str(), w, h, WRITE_YC, 1, V2f(0, 0), 1, INCREASING_Y, PIZ_COMPRESSION);
    vector<Rgba> pixels(w * h);
    for (int r = 0; r < h; r++)
        for (int x = 0; x < w; x++) {
            float v = smooth(0, x, r);
            pixels[r * w + x] = Rgba(v, v, v, 1);
        }
    out.setFrameBuffer(pixels.data(), 1, w);
    out.writePixels(h);
}

// refused writes the kinds that the reader refuses.
static void refused() {
    int w = 8, h = 8;
    vector<float> ones(w * h, 1.f);
    FrameBuffer buffer;
    buffer.insert("Y", Slice(FLOAT, (char *)ones.data(), 4, 4 * w));

    Header tiled(w, h);
    tiled.channels().insert("Y", Channel(FLOAT));
    tiled.setTileDescription(TileDescription(8, 8, ONE_LEVEL));
    TiledOutputFile t((folder + "tiled.exr").c_str(), tiled);
    t.setFrameBuffer(buffer);
    t.writeTiles(0, 0, 0, 0);

    vector<Header> parts(2, Header(w, h));
    for (int i = 0; i < 2; i++) {
        parts[i].channels().insert("Y", Channel(FLOAT));
        parts[i].setName(i ? "b" : "a");
        parts[i].setType(SCANLINEIMAGE);
    }
    MultiPartOutputFile m((folder + "multipart.exr").c_str(), parts.data(), 2);
    for (int i = 0; i < 2; i++) {
        OutputPart part(m, i);
        part.setFrameBuffer(buffer);
        part.writePixels(h);
    }

    Header deep(w, h);
    deep.channels().insert("Z", Channel(FLOAT));
    deep.setType(DEEPSCANLINE);
    deep.compression() = ZIPS_COMPRESSION;
    DeepScanLineOutputFile d((folder + "deep.exr").c_str(), deep);
    vector<unsigned> counts(w * h, 0);
    vector<float *> samples(w * h, nullptr);
    DeepFrameBuffer deepBuffer;
    deepBuffer.insertSampleCountSlice(Slice(UINT, (char *)counts.data(), 4, 4 * w));
    deepBuffer.insert("Z", DeepSlice(FLOAT, (char *)samples.data(), sizeof(float *), sizeof(float *) * w, 4));
    d.setFrameBuffer(deepBuffer);
    d.writePixels(h);
}

int main(int argc, char **argv) {
    if (argc != 2) return 2;
    folder = string(argv[1]) + "/";
    Box2i whole(V2i(0, 0), V2i(36, 44)), moved(V2i(-3, 5), V2i(33, 49)), part(V2i(4, 6), V2i(30, 50));
    rgb("rgb_half_rle.exr", RLE_COMPRESSION, HALF, whole, whole, INCREASING_Y, true);
    rgb("rgb_half_zips.exr", ZIPS_COMPRESSION, HALF, whole, whole, INCREASING_Y, false);
    rgb("rgb_half_zip.exr", ZIP_COMPRESSION, HALF, moved, moved, DECREASING_Y, true);
    rgb("rgb_half_piz.exr", PIZ_COMPRESSION, HALF, whole, whole, INCREASING_Y, true);
    rgb("rgb_float_piz.exr", PIZ_COMPRESSION, FLOAT, whole, part, INCREASING_Y, true);
    rgb("rgb_float_none.exr", NO_COMPRESSION, FLOAT, whole, whole, INCREASING_Y, true);
    rgb("rgb_half_pxr24.exr", PXR24_COMPRESSION, HALF, whole, whole, INCREASING_Y, true);
    y("y_float_piz.exr", FLOAT, 37, 70, 's');
    y("y_uint_noise_piz.exr", UINT, 330, 33, 'n');
    y("y_uint_ramp_piz.exr", UINT, 900, 33, 'r');
    y("y_uint_constant_piz.exr", UINT, 37, 45, 'c');
    yc();
    refused();
}
