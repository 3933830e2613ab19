"""From warping functions to stresses: fields, corners, largest values, joints, contacts."""
