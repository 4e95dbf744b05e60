"""Makes every table."""

import make_density
import make_gravity
import make_practical_salinity
import make_student_t
import make_unesco44

MAKERS = [make_density, make_practical_salinity, make_unesco44, make_gravity, make_student_t]

if __name__ == "__main__":
    for maker in MAKERS:
        maker.main()
