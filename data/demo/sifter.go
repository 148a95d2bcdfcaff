package demo

// SifterMount returns the mount file of the demonstration: four shear pads
// under the grain sifter for which HM-60 is qualified.
func SifterMount() []byte {
	return []byte(`# Invented data: no real machine, mount or maker.
# A grain sifter in an unheated mill stands on four shear pads of HM-60.
mount: sifter foot
elements:
  pad: {shape: shear pad, area: 2400 mm2, thickness: 20 mm}
arrangement: pad
count: 4
direction: vertical
load: {mass: 200 kg}
excitation: {displacement: 0.3 mm}     # zero to peak
part_factor: {value: 1.0, u: 3 %}      # specimen to part: not measured, judged
tolerance: {hardness: 5 IRHD}          # production spread, not test uncertainty
`)
}
