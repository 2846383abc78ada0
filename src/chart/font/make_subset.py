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


def main(folder):
    here = Path(__file__).parent
    for source, style, target in [("Inter-Regular.otf", "Regular", "regular"), ("Inter-SemiBold.otf", "Bold", "bold")]:
        font = TTFont(Path(folder) / source)
        tabular_digits(font)
        options = subset.Options(layout_features=[], hinting=False, notdef_outline=True, desubroutinize=False,
                                 name_IDs=["*"], legacy_kern=False, drop_tables=["GSUB", "GPOS", "GDEF", "STAT", "DSIG"])
        cutter = subset.Subsetter(options)
        cutter.populate(unicodes=[code for low, high in RANGES for code in range(low, high + 1)])
        cutter.subset(font)
        rename(font, style)
        font.save(here / f"{target}.otf")
        font.flavor = "woff2"
        web = BytesIO()
        font.save(web)
        (here / f"{target}.woff2.base64").write_bytes(base64.b64encode(web.getvalue()))
        print(style, len(font.getGlyphOrder()), "glyphs")


main(sys.argv[1])
