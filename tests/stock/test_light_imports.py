"""The stock is cheap to import: heavy libraries are loaded where they are used."""

import subprocess
import sys


def test_importing_the_stock_loads_nothing_heavy() -> None:
    program = (
        "import sys\n"
        "from meshlure.stock import balls, cautions, hardware, materials, rods, waters\n"
        "materials.materials(); hardware.hardware(); balls.sizes(); cautions.all_cautions()\n"
        "rods.rod_diameters('lead'); balls.ball_diameters('lead')\n"
        "heavy = {'gsw', 'fluids', 'pint', 'numpy', 'scipy', 'trimesh'} & set(sys.modules)\n"
        "assert not heavy, heavy\n"
    )
    subprocess.run([sys.executable, "-c", program], check=True, timeout=60)
