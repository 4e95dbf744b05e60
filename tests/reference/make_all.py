"""Makes every table; that of the real casts only when their folder is given.

    python make_all.py [FOLDER]
"""

import sys

import make_atlas_points
import make_check_casts
import make_cruise_casts
import make_density
import make_equation_of_state
import make_gravity
import make_gum
import make_iapws
import make_orders_of_magnitude
import make_polynomial
import make_practical_salinity
import make_student_t
import make_unesco44

MAKERS = [
    make_atlas_points,
    make_density,
    make_practical_salinity,
    make_unesco44,
    make_gravity,
    make_student_t,
    make_iapws,
    make_check_casts,
    make_orders_of_magnitude,
    make_gum,
    make_polynomial,
    make_equation_of_state,
]

if __name__ == "__main__":
    for maker in MAKERS:
        maker.main()
    if len(sys.argv) == 2:
        make_cruise_casts.main(sys.argv[1])
    else:
        print("cruise_casts.csv: left as it is, no folder given")
