//! The entries of this chapter.

use crate::catalogue::{Argument, Definition, Entry, Topic, Type, argument};
use crate::cosmology::template::{
    BLANK, COMOVING_LENGTH, NUMBER_TYPE, PROPER_LENGTH, TIME_TYPE, Z, Z_OR_TODAY, Z_SEEN, number_of, redshift,
};
use crate::cosmology::time;
use crate::dimension::{LENGTH, SPEED, TIME, VOLUME};

const CHAPTER: Entry = Entry {
    topic: Topic::Horizons,
    ..BLANK
};
const DAVIS: &str = "Davis & Lineweaver 2004, PASA 21, 97";
const RINDLER: &str = "Rindler 1956, MNRAS 116, 662; Davis & Lineweaver 2004, PASA 21, 97, appendix A";
const BOUND: &[Argument] = &[argument("bound", NUMBER_TYPE, "bound on |Ωk|, not 0")];
const SWEPT: Type = Type::of(VOLUME.comoving().per(TIME));

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[
    Entry {
        name: "particle_horizon",
        aliases: &["observable_radius"],
        synonyms: &["horizon", "observable universe", "how far"],
        about: "Proper radius of all that light since the big bang could have reached us from.",
        arguments: Z_OR_TODAY,
        result: PROPER_LENGTH,
        open_today: true,
        usual_unit: "Gly",
        formula: "c η(z)/(1+z) = (c/(1+z)) ∫_z^∞ dz′/H(z′)",
        validity: "models with a big bang, decelerating at first",
        source: RINDLER,
        example: "particle_horizon() under concordance is 46.16682 Gly",
        definition: Definition::Cosmology(|model, x| Ok(model.particle_horizon(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "particle_horizon_comoving",
        synonyms: &["horizon", "observable universe"],
        about: "Comoving radius of the particle horizon.",
        arguments: Z_OR_TODAY,
        result: COMOVING_LENGTH,
        open_today: true,
        usual_unit: "Gly",
        formula: "c η(z) = c ∫_z^∞ dz′/H(z′)",
        validity: "models with a big bang, decelerating at first",
        source: RINDLER,
        example: "particle_horizon_comoving(1) under concordance is 35.391172 Gly",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.particle_horizon_comoving(redshift(x, 0)?)?.value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "particle_horizon_limit",
        synonyms: &["horizon", "future visibility limit"],
        about: "Comoving radius that the particle horizon approaches in the far future.",
        result: COMOVING_LENGTH,
        usual_unit: "Gly",
        formula: "c ∫_{−1}^∞ dz′/H(z′)",
        validity: "models with a big bang and an event horizon",
        source: DAVIS,
        example: "particle_horizon_limit under concordance is 62.10018 Gly",
        definition: Definition::ModelValue(|model| Ok(model.particle_horizon_limit()?.value)),
        ..CHAPTER
    },
    Entry {
        name: "event_horizon",
        synonyms: &["horizon", "out of reach"],
        about: "Proper radius beyond which light emitted at redshift z never reaches us.",
        arguments: Z_OR_TODAY,
        result: PROPER_LENGTH,
        open_today: true,
        usual_unit: "Gly",
        formula: "(c/(1+z)) ∫_{−1}^z dz′/H(z′)",
        validity: "models that accelerate for ever, or end",
        source: RINDLER,
        example: "event_horizon() under concordance is 15.93336 Gly",
        definition: Definition::Cosmology(|model, x| Ok(model.event_horizon(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "recession_speed",
        aliases: &["recession_velocity"],
        synonyms: &["faster than light", "superluminal"],
        about: "Speed at which what is seen at redshift z recedes today.",
        arguments: Z,
        result: Type::of(SPEED),
        usual_unit: "c",
        formula: "v = H0 D_C",
        source: "Davis & Lineweaver 2004, PASA 21, 97, eq. 1",
        example: "recession_speed(1) under concordance is 231268.02 km/s",
        definition: Definition::Cosmology(|model, x| Ok(model.recession_speed(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "recession_speed_then",
        aliases: &["recession_velocity_then"],
        synonyms: &["faster than light", "superluminal"],
        about: "Speed at which what is seen at redshift z receded when it emitted the light.",
        arguments: Z,
        result: Type::of(SPEED),
        usual_unit: "c",
        formula: "v = H(z) D_C/(1+z)",
        source: "Davis & Lineweaver 2004, PASA 21, 97, eq. 1",
        example: "recession_speed_then(1) under concordance is 203594.68 km/s",
        definition: Definition::Cosmology(|model, x| Ok(model.recession_speed_then(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "z_hubble_sphere",
        aliases: &["z_superluminal"],
        synonyms: &["faster than light", "Hubble radius"],
        about: "Redshift of what recedes at the speed of light today, on the Hubble sphere.",
        formula: "D_C(z) = c/H0",
        source: "Davis & Lineweaver 2004, PASA 21, 97, sec. 3 (1.46)",
        example: "z_hubble_sphere under concordance is 1.456542",
        definition: Definition::ModelValue(|model| number_of(model.hubble_sphere_redshift())),
        ..CHAPTER
    },
    Entry {
        name: "z_superluminal_then",
        aliases: &["z_light_cone_max"],
        synonyms: &["faster than light", "past light cone"],
        about: "Redshift beyond which what we see receded faster than light when it emitted it: the widest place of our past light cone.",
        formula: "H(z) D_C/(1+z) = c",
        source: "Davis & Lineweaver 2004, PASA 21, 97, sec. 3",
        example: "z_superluminal_then under concordance is 1.605423",
        definition: Definition::ModelValue(|model| number_of(model.light_cone_peak())),
        ..CHAPTER
    },
    Entry {
        name: "z_event_horizon",
        synonyms: &["horizon", "out of reach"],
        about: "Redshift of what stands on the event horizon today: beyond it, no light emitted now will ever arrive.",
        formula: "D_C(z) = event_horizon(0)",
        validity: "models with an event horizon",
        source: "Davis & Lineweaver 2004, PASA 21, 97, sec. 3 (1.8)",
        example: "z_event_horizon under concordance is 1.805062",
        definition: Definition::ModelValue(|model| number_of(model.event_horizon_redshift())),
        ..CHAPTER
    },
    Entry {
        name: "light_cone",
        synonyms: &["past light cone", "teardrop"],
        about: "Proper distance of our past light cone at a time since the big bang.",
        arguments: &[argument("t", TIME_TYPE, "cosmic time, 0 < t ≤ age()")],
        result: PROPER_LENGTH,
        usual_unit: "Gly",
        formula: "D_C(z)/(1+z) with age(z) = t",
        validity: "models with a big bang",
        source: "Davis & Lineweaver 2004, PASA 21, 97, fig. 1",
        example: "light_cone(5 Gyr) under concordance is 5.587042 Gly",
        definition: Definition::Cosmology(|model, x| Ok(model.light_cone(time(x[0]))?.value)),
        ..CHAPTER
    },
    Entry {
        name: "light_cone_max",
        synonyms: &["past light cone"],
        about: "The largest proper distance on our past light cone.",
        result: PROPER_LENGTH,
        usual_unit: "Gly",
        formula: "light_cone at z_superluminal_then",
        source: "Davis & Lineweaver 2004, PASA 21, 97, fig. 1",
        example: "light_cone_max under concordance is 5.699817 Gly",
        definition: Definition::ModelValue(|model| {
            Ok(model.proper_distance_then(model.light_cone_peak()?)?.value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "light_cone_max_time",
        aliases: &["age_light_cone_max"],
        synonyms: &["past light cone"],
        about: "Time since the big bang at which our past light cone is widest.",
        result: TIME_TYPE,
        usual_unit: "Gyr",
        formula: "age(z_superluminal_then)",
        validity: "models with a big bang",
        source: "Davis & Lineweaver 2004, PASA 21, 97, fig. 1",
        example: "light_cone_max_time under concordance is 3.958777 Gyr",
        definition: Definition::ModelValue(|model| Ok(model.age(model.light_cone_peak()?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "arrival_time",
        synonyms: &["will it arrive", "never", "event horizon"],
        about: "Time since the big bang at which light emitted today by what is now seen at redshift z reaches us, or never.",
        arguments: Z_SEEN,
        result: TIME_TYPE,
        usual_unit: "Gyr",
        formula: "age(z′) with −D_C(z′) = D_C(z)",
        validity: "z ≥ 0, models with a big bang",
        source: DAVIS,
        example: "arrival_time(1) under concordance is 32.050416 Gyr",
        definition: Definition::Cosmology(|model, x| Ok(model.arrival_time(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "arrival_wait",
        synonyms: &["will it arrive", "never", "event horizon"],
        about: "How long from today until light emitted today by what is now seen at redshift z reaches us, or never.",
        arguments: Z_SEEN,
        result: TIME_TYPE,
        usual_unit: "Gyr",
        formula: "arrival_time(z) − age()",
        validity: "z ≥ 0",
        source: DAVIS,
        example: "arrival_wait(1) under concordance is 18.583432 Gyr",
        definition: Definition::Cosmology(|model, x| Ok(model.arrival_wait(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "last_sight",
        synonyms: &["event horizon", "out of reach"],
        about: "The latest time since the big bang, by its own clock, at which we shall ever see what is now seen at redshift z.",
        arguments: &[argument(
            "z",
            NUMBER_TYPE,
            "redshift at which the object is seen, 0 < z",
        )],
        result: TIME_TYPE,
        usual_unit: "Gyr",
        formula: "age(z′) with (1+z′) event_horizon(z′) = D_C(z)",
        validity: "z > 0, models with an event horizon and a big bang",
        source: "Loeb 2002, Phys. Rev. D 65, 047301",
        example: "last_sight(1) under concordance is 19.820363 Gyr",
        definition: Definition::Cosmology(|model, x| Ok(model.last_sight(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "particle_horizon_growth",
        synonyms: &["horizon", "stars entering"],
        about: "Comoving volume that enters the particle horizon per unit of cosmic time.",
        arguments: Z_OR_TODAY,
        result: SWEPT,
        open_today: true,
        usual_unit: "Mpc^3/yr",
        formula: "4π D_M²(c η) c (1+z)",
        validity: "models with a particle horizon",
        source: RINDLER,
        example: "particle_horizon_growth() under concordance is 771.9553 Mpc^3/yr",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.particle_horizon_growth(redshift(x, 0)?)?.value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "event_horizon_loss",
        synonyms: &["horizon", "stars leaving"],
        about: "Comoving volume that leaves through the event horizon per unit of cosmic time.",
        arguments: Z_OR_TODAY,
        result: SWEPT,
        open_today: true,
        usual_unit: "Mpc^3/yr",
        formula: "4π D_M²((1+z) event_horizon(z)) c (1+z)",
        validity: "models with an event horizon",
        source: RINDLER,
        example: "event_horizon_loss() under concordance is 91.94899 Mpc^3/yr",
        definition: Definition::Cosmology(|model, x| Ok(model.event_horizon_loss(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "curvature_radius",
        synonyms: &["curvature", "closed universe"],
        about: "Radius of curvature of space today.",
        result: Type::open(LENGTH),
        usual_unit: "Gly",
        formula: "R = c/(H0 √|Ωk|)",
        validity: "curved models",
        source: "Peebles 1993, Principles of Physical Cosmology, eq. 13.4",
        example: "curvature_radius under general with H0 = 70 km/s/Mpc, Ωm = 0.4, ΩΛ = 0.8 is 31.234427 Gly",
        definition: Definition::ModelValue(|model| Ok(model.curvature_radius()?.value)),
        ..CHAPTER
    },
    Entry {
        name: "total_volume",
        synonyms: &["closed universe", "size of the universe"],
        about: "Volume today of all space in a closed model.",
        result: Type::open(VOLUME),
        usual_unit: "Gpc^3",
        formula: "2π² R³",
        validity: "closed models",
        source: "Einstein 1917, Sitzungsber. Preuss. Akad. Wiss., 142",
        example: "total_volume under general with H0 = 70 km/s/Mpc, Ωm = 0.4, ΩΛ = 0.8 is 17336.153 Gpc^3",
        definition: Definition::ModelValue(|model| Ok(model.total_volume()?.value)),
        ..CHAPTER
    },
    Entry {
        name: "circumference",
        synonyms: &["closed universe", "size of the universe"],
        about: "Length today of the straight way round a closed model.",
        result: Type::open(LENGTH),
        usual_unit: "Gly",
        formula: "2π R",
        validity: "closed models",
        source: "Einstein 1917, Sitzungsber. Preuss. Akad. Wiss., 142",
        example: "circumference under general with H0 = 70 km/s/Mpc, Ωm = 0.4, ΩΛ = 0.8 is 196.25169 Gly",
        definition: Definition::ModelValue(|model| Ok(model.circumference()?.value)),
        ..CHAPTER
    },
    Entry {
        name: "observable_fraction",
        synonyms: &["closed universe", "observable universe"],
        about: "Share of a closed model's space that lies within the particle horizon today.",
        formula: "(2χ − sin 2χ)/(2π), χ = c η/R",
        validity: "closed models with a big bang",
        source: RINDLER,
        example: "observable_fraction under general with H0 = 70 km/s/Mpc, Ωm = 0.4, ΩΛ = 0.8 is 0.374146",
        definition: Definition::ModelValue(|model| model.observable_fraction()),
        ..CHAPTER
    },
    Entry {
        name: "smallest_radius",
        synonyms: &["closed universe", "curvature bound"],
        about: "Radius of curvature of the smallest closed universe that a bound on |Ωk| allows.",
        arguments: BOUND,
        result: Type::open(LENGTH),
        usual_unit: "Gly",
        formula: "c/(H0 √bound)",
        source: "Peebles 1993, Principles of Physical Cosmology, eq. 13.4",
        example: "smallest_radius(0.002) under concordance is 312.34427 Gly",
        definition: Definition::Cosmology(|model, x| Ok(model.smallest_radius(x[0])?.value)),
        ..CHAPTER
    },
    Entry {
        name: "smallest_volume",
        synonyms: &["closed universe", "curvature bound"],
        about: "Volume of the smallest closed universe that a bound on |Ωk| allows.",
        arguments: BOUND,
        result: Type::open(VOLUME),
        usual_unit: "Gpc^3",
        formula: "2π² (c/(H0 √bound))³",
        source: "Einstein 1917, Sitzungsber. Preuss. Akad. Wiss., 142",
        example: "smallest_volume(0.002) under concordance is 17336153.2 Gpc^3",
        definition: Definition::Cosmology(|model, x| Ok(model.smallest_volume(x[0])?.value)),
        ..CHAPTER
    },
];
