"""Pin-jointed trusses: arrays in, arrays out, SI units."""
