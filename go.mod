module shearbook

go 1.26
