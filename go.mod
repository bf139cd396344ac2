module fewbits

go 1.26
