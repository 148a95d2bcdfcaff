package table

import (
	"strings"

	"phaselag/data/unit"
)

// Concept is what a column means. The values are the keys of "columns" in the
// campaign file.
type Concept string

// The concepts that headings are understood as.
const (
	Frequency         Concept = "frequency"
	Temperature       Concept = "temperature"
	Storage           Concept = "storage modulus"
	Loss              Concept = "loss modulus"
	Magnitude         Concept = "complex modulus" // its magnitude
	Phase             Concept = "phase angle"
	LossFactor        Concept = "loss factor"
	Strain            Concept = "strain"
	Time              Concept = "time"
	RelaxationModulus Concept = "relaxation modulus"
	StaticModulus     Concept = "modulus"
	Segment           Concept = "segment" // a number or name that changes from run to run

	// Used where the specimen is described, or understood so that they are not taken
	// for something else.
	SetTemperature   Concept = "set temperature"
	StaticStrain     Concept = "static strain"
	StaticForce      Concept = "static force"
	ComplexViscosity Concept = "complex viscosity"
	Stress           Concept = "stress"
	Torque           Concept = "torque"
	Force            Concept = "force"
	Displacement     Concept = "displacement"
	Angle            Concept = "angle"     // of twist
	Stiffness        Concept = "stiffness" // magnitude of the complex stiffness
	StorageStiffness Concept = "storage stiffness"
	LossStiffness    Concept = "loss stiffness"
)

// concept describes how headings name a concept.
type concept struct {
	name     Concept
	quantity unit.Quantity // "" for text
	symbols  []string      // capitals count; primes as ' and ''; no blanks
	words    []string      // small letters, no blanks, hyphens or underscores
}

// vocabulary holds the usual symbols and words (ISO 4664-1 and ISO 6721-1 use
// most of them; the rest is common practice, no source).
var vocabulary = []concept{
	{Frequency, unit.Frequency,
		[]string{"f", "ω", "w", "omega"},
		[]string{"frequency", "freq", "testfrequency", "angularfrequency", "angfrequency", "angfreq", "angularfreq", "circularfrequency", "frequenz", "fréquence"}},
	{Temperature, unit.Temperature,
		[]string{"T", "θ", "ϑ"},
		[]string{"temperature", "temp", "sampletemperature", "specimentemperature", "testtemperature", "meantemperature", "actualtemperature", "temperatur", "température"}},
	{Storage, unit.Modulus,
		[]string{"G'", "E'", "g'", "e'", "Gp", "Ep", "Gprime", "Eprime", "gprime", "eprime"},
		[]string{"storagemodulus", "storagemod", "speichermodul", "storage"}},
	{Loss, unit.Modulus,
		[]string{"G''", "E''", "g''", "e''", "Gpp", "Epp", "Gdoubleprime", "Edoubleprime", "gdoubleprime", "edoubleprime"},
		[]string{"lossmodulus", "lossmod", "verlustmodul"}},
	{Magnitude, unit.Modulus,
		[]string{"|G*|", "|E*|", "G*", "E*", "g*", "e*", "Gstar", "Estar", "gstar", "estar"},
		[]string{"complexmodulus", "complexmod", "dynamicmodulus", "magnitudeofcomplexmodulus", "complexmodulusmagnitude", "modulusmagnitude", "absolutemodulus", "|complexmodulus|"}},
	{Phase, unit.Angle,
		[]string{"δ", "φ", "ϕ"},
		[]string{"delta", "phase", "phaseangle", "lossangle", "phaseshift", "phaselag", "phasewinkel", "phi"}},
	{LossFactor, unit.Relative,
		[]string{"tanδ", "tan(δ)", "tgδ", "η", "G''/G'", "E''/E'", "tanD", "tand"},
		[]string{"tandelta", "tan(delta)", "tgdelta", "lossfactor", "losstangent", "dampingfactor", "verlustfaktor"}},
	{Strain, unit.Strain,
		[]string{"γ", "γ0", "γa", "ε", "ε0", "εa"},
		[]string{"strain", "strainamplitude", "strainamp", "amplitudeofstrain", "dynamicstrain", "oscillationstrain", "oscillatorystrain", "dynamicstrainamplitude", "gamma", "dehnung", "déformation"}},
	{Time, unit.Time, []string{"t"}, []string{"time", "testtime", "elapsedtime", "relaxationtime", "zeit"}},
	{RelaxationModulus, unit.Modulus, []string{"G(t)", "E(t)"}, []string{"relaxationmodulus", "stressrelaxationmodulus", "relaxationmod"}},
	{StaticModulus, unit.Modulus, []string{"G", "E"}, []string{"modulus", "staticmodulus", "youngsmodulus", "youngmodulus"}},
	{Segment, "", nil, []string{"rep", "repeat", "replicate", "repetition", "segment", "sweep", "run", "block", "step", "stepno", "stepnumber", "isotherm", "cycle", "interval", "series"}},

	{SetTemperature, unit.Temperature, nil, []string{"settemperature", "nominaltemperature", "temperatureset", "settemp", "programmedtemperature", "targettemperature", "chambertemperature", "oventemperature"}},
	{StaticStrain, unit.Strain, nil, []string{"staticstrain", "prestrain", "meanstrain"}},
	{StaticForce, unit.Force, nil, []string{"staticforce", "preload", "meanforce", "staticload"}},
	{ComplexViscosity, unit.Viscosity, []string{"η*", "|η*|"}, []string{"complexviscosity", "dynamicviscosity", "etastar"}},
	{Stress, unit.Modulus, []string{"σ", "τ"}, []string{"stress", "stressamplitude", "oscillationstress", "sigma", "tau"}},
	{Torque, unit.Torque, []string{"M"}, []string{"torque", "oscillationtorque", "moment", "torqueamplitude", "drehmoment"}},
	{Force, unit.Force, []string{"F"}, []string{"force", "dynamicforce", "forceamplitude", "load", "kraft"}},
	{Displacement, unit.Length, []string{"x"}, []string{"displacement", "dynamicdisplacement", "displacementamplitude", "oscillationdisplacement", "deflection", "travel", "weg"}},
	{Angle, unit.Angle, nil, []string{"angle", "twist", "angleoftwist", "twistangle", "rotation", "angleamplitude", "deflectionangle", "angulardisplacement", "oscillationangle"}},
	{Stiffness, unit.Stiffness, []string{"K*", "|K*|", "k*", "|k*|"}, []string{"stiffness", "complexstiffness", "dynamicstiffness", "springrate", "stiffnessmagnitude"}},
	{StorageStiffness, unit.Stiffness, []string{"K'", "k'"}, []string{"storagestiffness", "elasticstiffness"}},
	{LossStiffness, unit.Stiffness, []string{"K''", "k''"}, []string{"lossstiffness"}},
}

// Concepts lists the keys that "columns" of a campaign file may have.
func Concepts() []string {
	return []string{string(Frequency), string(Temperature), string(Storage), string(Loss), string(Magnitude), string(Phase),
		string(LossFactor), string(Strain), string(Time), string(RelaxationModulus), string(StaticModulus), string(Segment),
		string(Stiffness), string(StorageStiffness), string(LossStiffness), string(Force), string(Displacement), string(Torque), string(Angle)}
}

// Quantity says in which quantity the numbers of a concept are; "" for text.
func (c Concept) Quantity() unit.Quantity {
	for _, v := range vocabulary {
		if v.name == c {
			return v.quantity
		}
	}
	return ""
}

// ParseConcept finds the concept that a key of "columns" names: its own name or
// any heading that would be understood as it.
func ParseConcept(key string) (Concept, bool) {
	k := strings.ReplaceAll(key, "_", " ")
	for _, c := range Concepts() {
		if strings.EqualFold(c, k) {
			return Concept(c), true
		}
	}
	m, ok := recognize(key)
	return m.concept, ok
}
