package fluids

// Standard values that hold for every job.
const (
	StandardAtmosphere = 101325.0 // Pa, ISO 2533
	StandardSalinity   = 35.16504 // g/kg, standard sea water of practical salinity 35 (Millero et al. 2008)
	Gravity            = 9.80665  // m/s2, standard acceleration of free fall (ISO 80000-3, exact by definition)
)

const zeroCelsius = 273.15 // K, exact by definition
