"""Says how far each SVG of the gallery, drawn by an independent renderer, lies from our own PNG of the same picture.

Run `cargo test --test chart_gallery` first, then, with PyPI resvg-py 0.5.0, pillow and numpy:

    python tests/reference/chart_svg_agrees.py target/tmp/gallery src/chart/font

Prints the share of pixels that differ by more than 80 of 255 steps; edges and text at sub-pixel places make up a part in a
thousand. Ends with status 1 if a picture differs in more than 0.5 % of its pixels. Hostile names in scripts that
the fonts lack are left out: there the SVG keeps the text and the PNG shows a mark, on purpose.
"""

import io
import sys
from pathlib import Path

import numpy as np
import resvg_py
from PIL import Image, ImageChops

gallery, fonts = Path(sys.argv[1]), Path(sys.argv[2])
worst = 0.0
for svg in sorted(gallery.glob("*_realistic.svg")):
    ours = Image.open(svg.with_suffix(".png")).convert("RGB")
    drawn = resvg_py.svg_to_bytes(
        svg_path=str(svg),
        width=ours.width,
        skip_system_fonts=True,
        font_files=[str(fonts / "regular.otf"), str(fonts / "bold.otf")],
        background="#ffffff",
    )
    theirs = Image.open(io.BytesIO(bytes(drawn))).convert("RGB")
    assert theirs.size == ours.size, (svg.name, theirs.size, ours.size)
    share = (np.asarray(ImageChops.difference(ours, theirs)).max(2) > 80).mean()
    worst = max(worst, share)
    print(f"{svg.stem:32} {share:.4%}")
sys.exit(int(worst > 0.005))
