"""What needs no property never waits for CoolProp."""

import subprocess
import sys


def test_names_and_oils_leave_coolprop_alone():
    program = (
        "import sys\n"
        "from cellfuncs.substances import find, names, oil_viscosity, property_key\n"
        "find('water'); find('MEG 30 % by mass'); names('r1'); property_key('mu')\n"
        "find('ISO VG 46 VI 95').get('viscosity', 320.0)\n"
        "oil_viscosity(320.0, 313.15, 46e-6, 373.15, 6.8e-6)\n"
        "sys.exit('CoolProp' in sys.modules or 'scipy' in sys.modules)\n"
    )
    assert subprocess.run([sys.executable, "-c", program], check=False).returncode == 0
