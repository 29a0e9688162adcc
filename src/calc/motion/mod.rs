//! Motion of the slide: kinematics, brake, the stop itself, the map and the fit.
