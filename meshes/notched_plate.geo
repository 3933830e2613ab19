// Plate 60 x 20 with a round notch of radius 6 in its upper face; mesh sizes are the program's own business.
SetFactory("OpenCASCADE");
Rectangle(1) = {-30, -10, 0, 60, 20};
Disk(2) = {12, 10, 0, 6};
BooleanDifference{ Surface{1}; Delete; }{ Surface{2}; Delete; }
Physical Surface("plate") = {1};
