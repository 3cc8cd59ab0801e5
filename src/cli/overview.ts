/** What `galewake` alone prints. A plain text, so that asking for help loads no engine. */
export const OVERVIEW = `galewake: tropical-cyclone tracks to gridded wind

Usage: galewake COMMAND [options]

  tracks FILE              what is in a track file; the completed track; convert
  profile                  radial table of one vortex: winds, pressure, balance
  swath FILE               peak wind and gust over the life of a storm, isotachs
  sites FILE PLACES        wind against time at places
  exposure FILE ASSETS     what stands in the wind
  verify FILE...           modelled against observed wind radii
  events run INPUT         many storms: return-period maps; curves, losses, show;
                           plan, shard, missing, reduce, submit for a batch
  recipe                   the modelling choices in force, with their sources

galewake COMMAND --help tells the options of a command; --version the version.
A FILE of - is standard input. Quantities take units: 34kt, 2km, 0.02deg, 10min.
Exit codes: 0 done, 1 failure inside, 2 usage, 3 bad input, 130 interrupted.

Galewake is no warning service. For warnings and for decisions about safety turn
to the national meteorological service and the local emergency authorities.
`;
