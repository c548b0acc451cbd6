"""Makes the two small faces that Lexend lacks glyphs for. Run once, by hand, when a source package changes:

    python3 -m pip install fonttools brotli
    python3 client/assets/fonts/make-fonts.py

Signs: flat, sharp, natural, degree, slashed o from Academico; double accidentals and the major-seventh triangle from
Bravura, scaled to stand beside Lexend capitals (700 units high). Figures: Lexend's digits in cells of equal width.
Both sources reserve their names (SIL OFL 1.1), so these derived faces carry names of their own.
"""

from pathlib import Path

from fontTools.fontBuilder import FontBuilder
from fontTools.pens.boundsPen import BoundsPen
from fontTools.pens.cu2quPen import Cu2QuPen
from fontTools.pens.transformPen import TransformPen
from fontTools.pens.ttGlyphPen import TTGlyphPen
from fontTools.ttLib import TTFont
from fontTools.ttLib.tables._g_l_y_f import flagOverlapSimple

HERE = Path(__file__).parent
PACKAGES = HERE.parents[2] / "node_modules"
VEX = PACKAGES / "@vexflow-fonts"
LEXEND = PACKAGES / "@fontsource/lexend/files"
ASCENT, DESCENT = 1000, -250


def outline(font, codepoint, matrix, embolden=0):
    """`embolden`: the outline is laid over itself at the corners of a square of this side, which thickens every stroke."""
    glyphs = font.getGlyphSet()
    pen = TTGlyphPen(None)
    half = embolden / 2
    corners = [(-half, -half), (half, -half), (-half, half), (half, half)] if embolden else [(0, 0)]
    for dx, dy in corners:
        moved = (*matrix[:4], matrix[4] + dx, matrix[5] + dy)
        # Cubic sources become quadratic within one unit; direction flips as TrueType wants.
        glyphs[font.getBestCmap()[codepoint]].draw(TransformPen(Cu2QuPen(pen, 0.8, reverse_direction="CFF " in font), moved))
    glyph = pen.glyph()
    if embolden:
        glyph.flags[0] |= flagOverlapSimple
    return glyph


def bounds(font, codepoint):
    glyphs = font.getGlyphSet()
    pen = BoundsPen(glyphs)
    glyphs[font.getBestCmap()[codepoint]].draw(pen)
    return pen.bounds


def fitted(font, codepoint, bottom, height, side, embolden):
    """Glyph scaled so that it stands on `bottom`, is `height` tall and has `side` units of air left and right."""
    x0, y0, x1, y1 = bounds(font, codepoint)
    scale = height / (y1 - y0)
    matrix = (scale, 0, 0, scale, side - x0 * scale, bottom - y0 * scale)
    return outline(font, codepoint, matrix, embolden), round((x1 - x0) * scale + 2 * side)


def save(family, weight, glyphs, licence, out):
    """`glyphs`: list of (name, codepoints, outline, advance)."""
    builder = FontBuilder(1000, isTTF=True)
    empty = TTGlyphPen(None).glyph()
    builder.setupGlyphOrder([".notdef", *(name for name, *_ in glyphs)])
    builder.setupCharacterMap({cp: name for name, cps, *_ in glyphs for cp in cps})
    builder.setupGlyf({".notdef": empty, **{name: shape for name, _, shape, _ in glyphs}})
    metrics = {name: (advance, 0) for name, _, _, advance in glyphs}
    table = builder.font["glyf"]
    for name in metrics:
        metrics[name] = (metrics[name][0], getattr(table[name], "xMin", 0) if table[name].numberOfContours else 0)
    builder.setupHorizontalMetrics({".notdef": (500, 0), **metrics})
    builder.setupHorizontalHeader(ascent=ASCENT, descent=DESCENT)
    style = "Regular" if weight == 400 else "SemiBold"
    builder.setupNameTable({"familyName": family, "styleName": style, "licenseDescription": licence,
                            "licenseInfoURL": "https://openfontlicense.org"})
    builder.setupOS2(sTypoAscender=ASCENT, sTypoDescender=DESCENT, usWinAscent=ASCENT, usWinDescent=-DESCENT,
                     usWeightClass=weight, sCapHeight=700)
    builder.setupPost()
    builder.font.flavor = "woff2"
    builder.save(HERE / out)


def signs(weight, academico):
    text, music = TTFont(VEX / "academico" / academico), TTFont(VEX / "bravura/bravura.woff2")
    rows = []
    for name, cps, font, source, bottom, height, side in [
        ("flat", [0x266D], text, 0x266D, -15, 800, 30),
        ("sharp", [0x266F], text, 0x266F, -60, 820, 35),
        ("natural", [0x266E], text, 0x266E, -60, 820, 35),
        ("doubleFlat", [0x1D12B], music, 0xE264, -15, 800, 30),
        ("doubleSharp", [0x1D12A], music, 0xE263, 140, 420, 35),
        ("triangle", [0xE873, 0x25B3], music, 0xE873, 8, 680, 45),
        ("degree", [0x00B0, 0xE870], text, 0x00B0, 330, 420, 45),
        ("slashedO", [0x00F8, 0xE871], text, 0x00F8, -50, 760, 40),
    ]:
        shape, advance = fitted(font, source, bottom, height, side, 22 if weight == 600 else 0)
        rows.append((name, cps, shape, advance))
    save("Plumbline Signs", weight, rows, "SIL Open Font License 1.1; made from Academico and Bravura, (c) Steinberg", f"plumbline-signs-{weight}.woff2")


def figures(weight):
    font = TTFont(LEXEND / f"lexend-latin-{weight}-normal.woff2")
    cmap, widths = font.getBestCmap(), font["hmtx"]
    cell = max(widths[cmap[ord(d)]][0] for d in "0123456789")
    rows = []
    for char in "0123456789":
        own = widths[cmap[ord(char)]][0]
        rows.append((f"digit{char}", [ord(char)], outline(font, ord(char), (1, 0, 0, 1, (cell - own) / 2, 0)), cell))
    save("Plumbline Figures", weight, rows, "SIL Open Font License 1.1; made from Lexend", f"plumbline-figures-{weight}.woff2")


for weight, academico in ((400, "academico.woff2"), (600, "academico-bold.woff2")):
    signs(weight, academico)
    figures(weight)
