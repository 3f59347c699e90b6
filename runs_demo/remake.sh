#!/usr/bin/env bash
# Remakes everything in this folder: bash runs_demo/remake.sh (with evolve[figures] installed).
set -euo pipefail
cd "$(dirname "$0")"
evolve run ../configs/red_dwarf.toml -o red_dwarf.h5 --replace > red_dwarf.txt
evolve export red_dwarf.h5 --rows 200 --on time --format ecsv -o red_dwarf.ecsv --replace \
  --columns time,period,mass_A,mass_B,radius_A,overflow_A,torque_waves,torque_braking
evolve draw red_dwarf.h5 -o red_dwarf.png --replace
evolve draw red_dwarf.h5 --figure rate-period --gap -o red_dwarf_rate_period.png --replace
evolve draw red_dwarf.h5 --figure ledger -o red_dwarf_ledger.png --replace
evolve draw red_dwarf.h5 --figure pair --at start --at contact --at "period_minimum[-1]" --at end -o red_dwarf_pair.png --replace
evolve draw red_dwarf.h5 --figure stability -o red_dwarf_stability.png --replace
evolve run ../configs/white_dwarfs.toml --set "observer.distance=1 kpc" -o white_dwarfs.h5 --replace > /dev/null
evolve draw white_dwarfs.h5 --figure waves -o white_dwarfs_waves.png --replace
evolve lobe --mass-ratio 0.4 --draw potential.png --replace > /dev/null
evolve report red_dwarf.h5 -o red_dwarf.html --replace
evolve run ../configs/neutron_star_conservative.toml -o conservative.h5 --replace > /dev/null
evolve run ../configs/neutron_star_expelling.toml -o expelling.h5 --replace > /dev/null
evolve compare conservative.h5 expelling.h5 --on mass_A --draw conservative_or_expelling_differences.png --replace > conservative_or_expelling.txt
evolve draw conservative.h5 expelling.h5 -o conservative_or_expelling.png --replace
evolve contact ../configs/red_dwarf.toml > contact.txt
evolve sweep ../configs/studies/contact_time.toml -o contact_time.h5 --replace > contact_time.txt 2> /dev/null
evolve draw contact_time.h5 -o contact_time.png --replace
evolve sweep ../configs/studies/bifurcation.toml -o bifurcation.h5 --replace > bifurcation.txt 2> /dev/null
evolve draw bifurcation.h5 --result end.period -o bifurcation.png --replace
evolve sweep ../configs/studies/bifurcation_giants.toml -o bifurcation_giants.h5 --replace > bifurcation_giants.txt 2> /dev/null
evolve draw bifurcation_giants.h5 --result end.period -o bifurcation_giants.png --replace
evolve origin ../configs/studies/origin.toml --draw origin.png --replace > origin.txt 2> /dev/null
rm conservative.h5 expelling.h5 white_dwarfs.h5
