"""Makes the two fonts that every picture embeds, and their web-font twins (as base64 text, ready for a page).

Source: the Debian package `fonts-inter` (version 4.0~beta7+ds-1), the Inter typeface, SIL Open Font License 1.1, no
reserved font name. Run with fonttools 4.68.0 and brotli 1.2.1:

    python make_subset.py FOLDER_WITH_Inter-Regular.otf_AND_Inter-SemiBold.otf

What is changed, and why:
- Only the characters below are kept (Latin, Greek, Cyrillic, the signs used on axes), so an SVG stays small.
- The digits are replaced by the typeface's own tabular digits, so columns of figures line up.
- Kerning and all other OpenType features are dropped: a browser then sets exactly the widths that the
  layout measured, and a label box is the same box everywhere.
- The family is renamed, as a changed font should be: it must never be mistaken for an installed original.
"""

import base64
import sys
from io import BytesIO
from pathlib import Path

from fontTools import subset
from fontTools.ttLib import TTFont

FAMILY = "Winterledger Sans"
RANGES = [
    (0x20, 0x7E), (0xA0, 0x17F), (0x192, 0x192), (0x218, 0x21B), (0x386, 0x3CE), (0x400, 0x45F), (0x490, 0x491),
    (0x1E9E, 0x1E9E), (0x2002, 0x200A), (0x2010, 0x2015), (0x2018, 0x201E), (0x2020, 0x2022), (0x2026, 0x2026),
    (0x202F, 0x2030), (0x2032, 0x2033), (0x2039, 0x203A), (0x2044, 0x2044), (0x2070, 0x2079), (0x207A, 0x207B),
    (0x2080, 0x2089), (0x20A0, 0x20BF), (0x2116, 0x2116), (0x2122, 0x2122), (0x2190, 0x2193), (0x2206, 0x2206),
    (0x2212, 0x2212), (0x221A, 0x221A), (0x221E, 0x221E), (0x2248, 0x2248), (0x2260, 0x2260), (0x2264, 0x2265),
    (0x25A0, 0x25A1), (0x25B2, 0x25B2), (0x25BC, 0x25BC), (0x25CF, 0x25CF), (0xFFFD, 0xFFFD),
]
# Letters of further European and many African and Asian languages in Latin, Greek and Cyrillic, accents of their own, and signs. They are in
# the fonts that paint PNG and paper; as a web font they are a file of their own, which a page carries only where it uses one of them.
MORE = [
    (0x180, 0x2FF), (0x300, 0x36F), (0x370, 0x3FF), (0x400, 0x52F), (0x1E00, 0x1EFF), (0x1F00, 0x1FFF), (0x2100, 0x218F),
    (0x2190, 0x21FF), (0x2200, 0x22FF), (0x2460, 0x24FF), (0x25A0, 0x27BF), (0x2C60, 0x2C7F), (0xA720, 0xA7FF),
]


def tabular_digits(font):
    """Points the digits of the character map at the glyphs of the typeface's `tnum` feature."""
    table = font["GSUB"].table
    lookups = {i for f in table.FeatureList.FeatureRecord if f.FeatureTag == "tnum" for i in f.Feature.LookupListIndex}
    swap = {}
    for index in lookups:
        for sub in table.LookupList.Lookup[index].SubTable:
            swap.update(getattr(sub, "ExtSubTable", sub).mapping)
    for cmap in font["cmap"].tables:
        for code in range(ord("0"), ord("9") + 1):
            if code in cmap.cmap:
                cmap.cmap[code] = swap.get(cmap.cmap[code], cmap.cmap[code])


def rename(font, style):
    name = font["name"]
    full = f"{FAMILY} {style}"
    for record, text in {1: FAMILY, 2: style, 3: full, 4: full, 6: full.replace(" ", "-"), 16: FAMILY, 17: style}.items():
        name.setName(text, record, 3, 1, 0x409)
    name.names = [n for n in name.names if n.nameID in {0, 1, 2, 3, 4, 6, 13, 14, 16, 17} and n.platformID == 3]
    if "CFF " in font:
        cff = font["CFF "].cff
        cff.fontNames = [full.replace(" ", "-")]
        top = cff.topDictIndex[0]
        top.FamilyName, top.FullName = FAMILY, full


def cut(source, style, codes):
    font = TTFont(source)
    tabular_digits(font)
    options = subset.Options(layout_features=[], hinting=False, notdef_outline=True, desubroutinize=False,
                             name_IDs=["*"], legacy_kern=False, drop_tables=["GSUB", "GPOS", "GDEF", "STAT", "DSIG"])
    cutter = subset.Subsetter(options)
    cutter.populate(unicodes=sorted(codes))
    cutter.subset(font)
    rename(font, style)
    return font


def unicode_range(codes):
    runs = []
    for code in sorted(codes):
        if runs and code == runs[-1][1] + 1:
            runs[-1][1] = code
        else:
            runs.append([code, code])
    return ",".join(f"U+{low:X}" if low == high else f"U+{low:X}-{high:X}" for low, high in runs)


def web(font, target):
    font.flavor = "woff2"
    out = BytesIO()
    font.save(out)
    target.write_bytes(base64.b64encode(out.getvalue()))


def main(folder):
    here = Path(__file__).parent
    spread = lambda ranges: {code for low, high in ranges for code in range(low, high + 1)}
    usual, more = spread(RANGES), spread(MORE)
    for source, style, target in [("Inter-Regular.otf", "Regular", "regular"), ("Inter-SemiBold.otf", "Bold", "bold")]:
        source = Path(folder) / source
        whole = cut(source, style, usual | more)
        whole.save(here / f"{target}.otf")
        web(cut(source, style, usual), here / f"{target}.woff2.base64")
        further = cut(source, style, more - usual)
        # What a page must use to carry the second file; CSS and the program read the same line.
        (here / "more-range.txt").write_text(unicode_range(further.getBestCmap()))
        web(further, here / f"{target}-more.woff2.base64")
        print(style, len(whole.getGlyphOrder()), "glyphs")


main(sys.argv[1])
