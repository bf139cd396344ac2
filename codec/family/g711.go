package family

import "fewbits/codec"

var g711Mu = Family{
	Name:    "g711-mu",
	About:   "the cells of ITU-T G.711 mu-law",
	MinBits: 8, MaxBits: 8,
	Make: func(Spec, Material) (Made, error) { return Made{Stair: codec.G711Mu()}, nil },
}

var g711A = Family{
	Name:    "g711-a",
	About:   "the cells of ITU-T G.711 A-law",
	MinBits: 8, MaxBits: 8,
	Make: func(Spec, Material) (Made, error) { return Made{Stair: codec.G711A()}, nil },
}
