//! Samples that cannot be right, or may not be: each with its reason.

mod pump;
mod reversal;
mod spike;
mod stuck;

use super::blocks::median;
use super::deck::{AIR_SHARE, TELLING_SALT};
use super::legs::{Leg, Legs};
use super::noise::Noise;
use crate::log::{Channel, Flag, Log};

/// What a suspicion is about.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Quantity {
    /// Pressure.
    Pressure,
    /// Temperature.
    Temperature,
    /// Conductivity, or salinity where the log has that.
    Salt,
}

/// Why a sample is suspect.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Reason {
    /// Outside what the sea has.
    Range,
    /// Out of the water for a moment, in the swell at the surface.
    InAir,
    /// Alone far off its neighbours.
    Spike,
    /// The same value while the instrument moved on.
    Stuck,
    /// The instrument went back through water it had stirred.
    Reversal,
    /// Conductivity stepped away and came back: water did not pass the cell.
    PumpOff,
    /// The log itself flags it.
    Logged,
}

impl Reason {
    /// Its name in results.
    pub fn name(self) -> &'static str {
        match self {
            Reason::Range => "out of range",
            Reason::InAir => "out of the water",
            Reason::Spike => "spike",
            Reason::Stuck => "stuck value",
            Reason::Reversal => "reversal",
            Reason::PumpOff => "pump off",
            Reason::Logged => "flagged in the log",
        }
    }

    /// The IOC flag that it earns: bad where the value is certainly not that of the water, else questionable.
    pub fn flag(self) -> Flag {
        match self {
            Reason::Range | Reason::InAir | Reason::Spike | Reason::Stuck => Flag::Bad,
            Reason::Reversal | Reason::PumpOff | Reason::Logged => Flag::Questionable,
        }
    }
}

/// One suspicion.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Suspect {
    /// The sample, from 0.
    pub sample: usize,
    /// What is wrong with it.
    pub quantity: Quantity,
    /// Why.
    pub reason: Reason,
}

/// Pressures in dbar above that of the air that occur: deck noise to below the deepest trench.
const PRESSURE_DBAR: (f64, f64) = (-3.0, 11_600.0);
/// Temperatures in degC that seawater has (hot vents apart, where no profile should come from).
const TEMPERATURE_DEGC: (f64, f64) = (-4.0, 42.0);
/// Practical Salinities that occur.
const SALINITY: (f64, f64) = (-0.1, 50.0);

/// An instrument this near the surface in dbar may come out of the water.
const AT_SURFACE_DBAR: f64 = 3.0;

/// Runs the tests over a cast and collects flags.
pub(super) struct Judge<'a> {
    log: &'a Log,
    pressure: &'a [f64],
    salinity: &'a [f64],
    legs: &'a Legs,
    noise: &'a Noise,
    surface_dbar: f64,
    pressure_flag: Vec<Flag>,
    water_flag: Vec<Flag>,
    suspects: Vec<Suspect>,
}

impl<'a> Judge<'a> {
    pub fn new(
        log: &'a Log,
        pressure: &'a [f64],
        salinity: &'a [f64],
        legs: &'a Legs,
        noise: &'a Noise,
        surface_dbar: f64,
    ) -> Self {
        let n = pressure.len();
        Self {
            log,
            pressure,
            salinity,
            legs,
            noise,
            surface_dbar,
            pressure_flag: vec![Flag::Good; n],
            water_flag: vec![Flag::Good; n],
            suspects: Vec::new(),
        }
    }

    pub fn run(&mut self) {
        self.missing();
        self.logged();
        self.ranges();
        self.in_air();
        self.spikes();
        self.stuck();
        self.pump_off();
        self.reversals();
    }

    /// Flags of pressure and of water, and the suspicions by sample.
    pub fn verdict(mut self) -> (Vec<Flag>, Vec<Flag>, Vec<Suspect>) {
        self.suspects.sort_by_key(|s| s.sample);
        (self.pressure_flag, self.water_flag, self.suspects)
    }

    fn salt(&self) -> Option<&'a Channel> {
        self.log.conductivity.as_ref().or(self.log.salinity.as_ref())
    }

    /// Notes a suspicion. The first one stands: what the log itself flags is not judged anew, and one fault is told once.
    fn accuse(&mut self, sample: usize, quantity: Quantity, reason: Reason, flag: Flag) {
        let kept = match quantity {
            Quantity::Pressure => &mut self.pressure_flag[sample],
            Quantity::Temperature | Quantity::Salt => &mut self.water_flag[sample],
        };
        if kept.usable() {
            *kept = flag;
            self.suspects.push(Suspect { sample, quantity, reason });
        }
    }

    /// Missing values: of pressure always, of the water where the log has these columns and is not on deck.
    fn missing(&mut self) {
        for (flag, p) in self.pressure_flag.iter_mut().zip(self.pressure) {
            if !p.is_finite() {
                *flag = Flag::Missing;
            }
        }
        for channel in self.log.temperature.iter().chain(self.salt()) {
            for i in self.legs.water() {
                if !channel.values[i].is_finite() {
                    self.water_flag[i] = Flag::Missing;
                }
            }
        }
    }

    /// Flags that the log carries.
    fn logged(&mut self) {
        let log = self.log;
        let of_sample = log.flags.as_deref();
        let salt = self.salt();
        let sources = [
            (Quantity::Pressure, log.pressure.flags.as_deref()),
            (Quantity::Temperature, log.temperature.as_ref().and_then(|c| c.flags.as_deref())),
            (Quantity::Salt, salt.and_then(|c| c.flags.as_deref())),
            // A flag of the whole sample does not say which value it means: it is honoured for all of them.
            (Quantity::Pressure, of_sample),
            (Quantity::Salt, of_sample),
        ];
        for (quantity, flags) in sources {
            for (i, &flag) in flags.unwrap_or(&[]).iter().enumerate() {
                if !flag.usable() {
                    self.accuse(i, quantity, Reason::Logged, flag);
                }
            }
        }
    }

    fn ranges(&mut self) {
        let outside = |v: f64, (low, high): (f64, f64)| v < low || v > high;
        for i in 0..self.pressure.len() {
            if outside(self.pressure[i] - self.surface_dbar, PRESSURE_DBAR) {
                self.accuse(i, Quantity::Pressure, Reason::Range, Reason::Range.flag());
            }
        }
        // In air anything may be read.
        for i in self.legs.water() {
            if let Some(t) = &self.log.temperature
                && outside(t.values[i], TEMPERATURE_DEGC)
            {
                self.accuse(i, Quantity::Temperature, Reason::Range, Reason::Range.flag());
            }
            if self.salinity.get(i).is_some_and(|s| outside(*s, SALINITY)) {
                self.accuse(i, Quantity::Salt, Reason::Range, Reason::Range.flag());
            }
        }
    }

    /// Hardly any salt at the surface of a salty sea.
    fn in_air(&mut self) {
        let Some(salt) = self.salt() else { return };
        let mut deeper: Vec<f64> = self
            .legs
            .water()
            .filter(|&i| self.pressure[i] - self.surface_dbar > AT_SURFACE_DBAR && salt.values[i].is_finite())
            .map(|i| salt.values[i])
            .collect();
        let Some(usual) = median(&mut deeper).filter(|&s| s > TELLING_SALT) else { return };
        for i in self.legs.water() {
            if self.pressure[i] - self.surface_dbar < AT_SURFACE_DBAR && salt.values[i] < AIR_SHARE * usual {
                self.accuse(i, Quantity::Salt, Reason::InAir, Reason::InAir.flag());
            }
        }
    }

    /// A log in equal steps of pressure has been averaged, and whoever did that took the spikes out.
    fn spikes(&mut self) {
        if self.noise.averaged_step_dbar.is_some() {
            return;
        }
        let temperature = self.log.temperature.as_ref().map(|t| t.values.as_slice());
        let salt = self.salt().map(|c| c.values.as_slice());
        let searches = [
            (Quantity::Pressure, Some(self.pressure), spike::LEAST_PRESSURE_DBAR),
            (Quantity::Temperature, temperature, spike::LEAST_TEMPERATURE_DEGC),
            (Quantity::Salt, salt, spike::LEAST_SALT),
        ];
        for (quantity, values, least) in searches {
            for i in spike::find(values.unwrap_or(&[]), self.legs.water(), least) {
                self.accuse(i, quantity, Reason::Spike, Reason::Spike.flag());
            }
        }
    }

    fn stuck(&mut self) {
        let water = self.legs.water();
        if let Some(t) = &self.log.temperature {
            for i in stuck::find(&t.values, self.pressure, water.clone(), &stuck::TEMPERATURE) {
                self.accuse(i, Quantity::Temperature, Reason::Stuck, Reason::Stuck.flag());
            }
        }
        // Salinity may well be the same over a thousand metres; conductivity, which feels pressure, may not.
        if let Some(c) = &self.log.conductivity {
            for i in stuck::find(&c.values, self.pressure, water.clone(), &stuck::CONDUCTIVITY) {
                self.accuse(i, Quantity::Salt, Reason::Stuck, Reason::Stuck.flag());
            }
        }
        for i in stuck::find_pressure(self.pressure, water) {
            self.accuse(i, Quantity::Pressure, Reason::Stuck, Reason::Stuck.flag());
        }
    }

    fn pump_off(&mut self) {
        // Without temperature there is no salinity from conductivity.
        if self.log.conductivity.is_none() || self.salinity.is_empty() {
            return;
        }
        for leg in [self.legs.range(Leg::Down), self.legs.range(Leg::Up)] {
            for i in pump::find(self.salinity, self.pressure, &self.water_flag, leg) {
                self.accuse(i, Quantity::Salt, Reason::PumpOff, Reason::PumpOff.flag());
            }
        }
    }

    fn reversals(&mut self) {
        if self.salt().is_none() && self.log.temperature.is_none() {
            return;
        }
        let found = reversal::find(self.pressure, &self.pressure_flag, self.legs, self.noise);
        for i in found {
            self.accuse(i, Quantity::Salt, Reason::Reversal, Reason::Reversal.flag());
        }
    }
}
