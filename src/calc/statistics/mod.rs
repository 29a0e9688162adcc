//! Statistics of stops and readings.
