"""Saint-Venant theory: mesh and moduli in, frozen constants and fields out."""
