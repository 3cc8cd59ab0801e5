/**
 * Every publication that a formula, a coefficient or a format is taken from, by the key that stands in brackets in doc
 * comments and in `source` fields. A DOI is given where it is known for certain.
 */
export const BIBLIOGRAPHY: Readonly<Record<string, string>> = {
  ASCE2005:
    'American Society of Civil Engineers, 2005: Minimum Design Loads for Buildings and Other Structures. ASCE/SEI 7-05',
  AbramowitzStegun1964:
    'Abramowitz, M., and I. A. Stegun, eds., 1964: Handbook of Mathematical Functions. National Bureau of Standards, Applied Mathematics Series 55',
  Adobe1992: 'Adobe Developers Association, 1992: TIFF, revision 6.0. Adobe Systems',
  Adobe2005:
    'Adobe Systems, 2005: Adobe Photoshop TIFF technical note 3: floating point values and the floating point predictor',
  AtkinsonHolliday1977:
    'Atkinson, G. D., and C. R. Holliday, 1977: Tropical cyclone minimum sea level pressure/maximum sustained wind relationship for the western North Pacific. Monthly Weather Review 105, 421–427. doi:10.1175/1520-0493(1977)105<0421:TCMSLP>2.0.CO;2',
  BlackmanVigna2021:
    'Blackman, D., and S. Vigna, 2021: Scrambled linear pseudorandom number generators. ACM Transactions on Mathematical Software 47, 36',
  BoM2023:
    'Bureau of Meteorology, 2023: Tropical cyclone categories. Knowledge Centre, Commonwealth of Australia, bom.gov.au',
  Bretschneider1972:
    'Bretschneider, C. L., 1972: A non-dimensional stationary hurricane wave model. Proc. Offshore Technology Conference, OTC 1517',
  CIE15: 'Commission Internationale de l’Éclairage, 2004: Colorimetry, 3rd ed. CIE 15:2004',
  ChavasKnaff2022:
    'Chavas, D. R., and J. A. Knaff, 2022: A simple model for predicting the tropical cyclone radius of maximum wind from outer size. Weather and Forecasting 37, 563–579. doi:10.1175/WAF-D-21-0103.1',
  ChavasLinEmanuel2015:
    'Chavas, D. R., N. Lin and K. Emanuel, 2015: A model for the complete radial structure of the tropical cyclone wind field. Part I: comparison with observed structure. J. Atmos. Sci. 72, 3647–3662',
  Coles2001: 'Coles, S., 2001: An Introduction to Statistical Modeling of Extreme Values. Springer',
  CourtneyKnaff2009:
    'Courtney, J., and J. A. Knaff, 2009: Adapting the Knaff and Zehr wind–pressure relationship for operational use in Tropical Cyclone Warning Centres. Australian Meteorological and Oceanographic Journal 58, 167–179',
  Cunnane1978: 'Cunnane, C., 1978: Unbiased plotting positions: a review. J. Hydrology 37, 205–222',
  DeMariaEtAl1992:
    'DeMaria, M., S. D. Aberson, K. V. Ooyama and S. J. Lord, 1992: A nested spectral model for hurricane track forecasting. Mon. Wea. Rev. 120, 1628–1643',
  DonelanEtAl2004:
    'Donelan, M. A., B. K. Haus, N. Reul, W. J. Plant, M. Stiassnie, H. C. Graber, O. B. Brown, and E. S. Saltzman, 2004: On the limiting aerodynamic roughness of the ocean in very strong winds. Geophysical Research Letters 31, L18306. doi:10.1029/2004GL019460',
  Durst1960: 'Durst, C. S., 1960: Wind speeds over short periods of time. Meteorological Magazine 89, 181–186',
  Dvorak1984:
    'Dvorak, V. F., 1984: Tropical cyclone intensity analysis using satellite data. NOAA Technical Report NESDIS 11',
  EatonEtAl2023: 'Eaton, B., and coauthors, 2023: NetCDF Climate and Forecast (CF) metadata conventions, version 1.11',
  Emanuel2004:
    'Emanuel, K., 2004: Tropical cyclone energetics and structure. In: Atmospheric Turbulence and Mesoscale Meteorology, Cambridge University Press, 165–191',
  Emanuel2011:
    'Emanuel, K., 2011: Global warming effects on U.S. hurricane damage. Weather, Climate, and Society 3, 261–268. doi:10.1175/WCAS-D-11-00007.1',
  EmanuelRotunno2011:
    'Emanuel, K., and R. Rotunno, 2011: Self-stratification of tropical cyclone outflow. Part I: implications for storm structure. J. Atmos. Sci. 68, 2236–2249',
  FayFeuer1997:
    'Fay, M. P., and E. J. Feuer, 1997: Confidence intervals for directly standardized rates: a method based on the gamma distribution. Statistics in Medicine 16, 791–801',
  Franklin2003:
    'Franklin, J. L., M. L. Black, and K. Valde, 2003: GPS dropwindsonde wind profiles in hurricanes and their operational implications. Weather and Forecasting 18, 32–44. doi:10.1175/1520-0434(2003)018<0032:GDWPIH>2.0.CO;2',
  FritschButland1984:
    'Fritsch, F. N., and J. Butland, 1984: A method for constructing local monotone piecewise cubic interpolants. SIAM Journal on Scientific and Statistical Computing 5, 300–304. doi:10.1137/0905021',
  FritschCarlson1980:
    'Fritsch, F. N., and R. E. Carlson, 1980: Monotone piecewise cubic interpolation. SIAM Journal on Numerical Analysis 17, 238–246. doi:10.1137/0717021',
  Fujita1952: 'Fujita, T., 1952: Pressure distribution within typhoon. Geophys. Mag. 23, 437–451',
  Garwood1936: 'Garwood, F., 1936: Fiducial limits for the Poisson distribution. Biometrika 28, 437–442',
  Georgiou1985:
    'Georgiou, P. N., 1985: Design Wind Speeds in Tropical Cyclone-Prone Regions. PhD thesis, University of Western Ontario',
  Gringorten1963:
    'Gringorten, I. I., 1963: A plotting rule for extreme probability paper. J. Geophys. Res. 68, 813–814',
  Gumbel1958: 'Gumbel, E. J., 1958: Statistics of Extremes. Columbia University Press',
  Harper2001:
    'Harper, B. A., ed., 2001: Queensland Climate Change and Community Vulnerability to Tropical Cyclones: Ocean Hazards Assessment, Stage 1. Queensland Government',
  HarperHolland1999:
    'Harper, B. A., and G. J. Holland, 1999: An updated parametric model of the tropical cyclone. 23rd Conference on Hurricanes and Tropical Meteorology, American Meteorological Society, Dallas',
  HarperKepertGinger2010:
    'Harper, B. A., J. D. Kepert, and J. D. Ginger, 2010: Guidelines for converting between various wind averaging periods in tropical cyclone conditions. World Meteorological Organization, WMO/TD-No. 1555',
  Harrtell2020:
    'Harrtell, B., 2020: FlatGeobuf, a performant binary encoding for geographic data: specification, version 3',
  Hilbert1891:
    'Hilbert, D., 1891: Ueber die stetige Abbildung einer Linie auf ein Flächenstück. Mathematische Annalen 38, 459–460. doi:10.1007/BF01199431',
  Holland1980:
    'Holland, G. J., 1980: An analytic model of the wind and pressure profiles in hurricanes. Monthly Weather Review 108, 1212–1218. doi:10.1175/1520-0493(1980)108<1212:AAMOTW>2.0.CO;2',
  Holland2008: 'Holland, G., 2008: A revised hurricane pressure–wind model. Mon. Wea. Rev. 136, 3432–3445',
  HollandBelangerFritz2010:
    'Holland, G. J., J. I. Belanger and A. Fritz, 2010: A revised model for radial profiles of hurricane winds. Mon. Wea. Rev. 138, 4393–4401',
  Holton2004: 'Holton, J. R., 2004: An Introduction to Dynamic Meteorology, 4th ed. Elsevier Academic Press',
  HoskingWallis1987:
    'Hosking, J. R. M., and J. R. Wallis, 1987: Parameter and quantile estimation for the generalized Pareto distribution. Technometrics 29, 339–349',
  HubbertEtAl1991:
    'Hubbert, G. D., G. J. Holland, L. M. Leslie, and M. J. Manton, 1991: A real-time system for forecasting tropical cyclone storm surges. Weather and Forecasting 6, 86–97',
  Hughes1952:
    'Hughes, L. A., 1952: On the low-level wind structure of tropical storms. Journal of Meteorology 9, 422–428',
  IEC61966:
    'International Electrotechnical Commission, 1999: Multimedia systems and equipment – Colour measurement and management – Part 2-1: Default RGB colour space – sRGB. IEC 61966-2-1:1999',
  IMD2021:
    'India Meteorological Department, 2021: Cyclone warning in India: standard operation procedure. Ministry of Earth Sciences, New Delhi',
  IogpEpsg2019: 'International Association of Oil and Gas Producers, 2019: EPSG geodetic parameter dataset',
  JMA2023:
    'Japan Meteorological Agency, 2023: Classification of tropical cyclones. RSMC Tokyo – Typhoon Center, www.jma.go.jp',
  Jelesnianski1966:
    'Jelesnianski, C. P., 1966: Numerical computations of storm surges without bottom stress. Monthly Weather Review 94, 379–394',
  KamelFaloutsos1993:
    'Kamel, I., and C. Faloutsos, 1993: On packing R-trees. Proceedings of the second international conference on Information and knowledge management, 490–499. doi:10.1145/170088.170403',
  KaplanDeMaria1995:
    'Kaplan, J., and M. DeMaria, 1995: A simple empirical model for predicting the decay of tropical cyclone winds after landfall. Journal of Applied Meteorology 34, 2499–2512. doi:10.1175/1520-0450(1995)034<2499:ASEMFP>2.0.CO;2',
  KaplanDeMaria2001:
    'Kaplan, J., and M. DeMaria, 2001: On the decay of tropical cyclone winds after landfall in the New England area. Journal of Applied Meteorology 40, 280–286',
  Kepert2001:
    'Kepert, J. D., 2001: The dynamics of boundary layer jets within the tropical cyclone core. Part I: linear theory. J. Atmos. Sci. 58, 2469–2484',
  KnaffEtAl2011:
    'Knaff, J. A., M. DeMaria, D. A. Molenar, C. R. Sampson, and M. G. Seybold, 2011: An automated, objective, multiple-satellite-platform tropical cyclone surface wind analysis. J. Appl. Meteor. Climatol. 50, 2149–2166',
  KnaffEtAl2015:
    'Knaff, J. A., S. P. Longmore, R. T. DeMaria, and D. A. Molenar, 2015: Improved tropical-cyclone flight-level wind estimates using routine infrared satellite reconnaissance. Journal of Applied Meteorology and Climatology 54, 463–478',
  KnaffZehr2007:
    'Knaff, J. A., and R. M. Zehr, 2007: Reexamination of tropical cyclone wind–pressure relationships. Weather and Forecasting 22, 71–88. doi:10.1175/WAF965.1',
  KnappEtAl2010:
    'Knapp, K. R., M. C. Kruk, D. H. Levinson, H. J. Diamond, and C. J. Neumann, 2010: The International Best Track Archive for Climate Stewardship (IBTrACS): unifying tropical cyclone data. Bulletin of the American Meteorological Society 91, 363–376. doi:10.1175/2009BAMS2755.1',
  KrayerMarshall1992:
    'Krayer, W. R., and R. D. Marshall, 1992: Gust factors applied to hurricane winds. Bulletin of the American Meteorological Society 73, 613–617',
  Lanczos1964:
    'Lanczos, C., 1964: A precision approximation of the gamma function. Journal of the Society for Industrial and Applied Mathematics, Series B: Numerical Analysis 1, 86–96',
  LandseaFranklin2013:
    'Landsea, C. W., and J. L. Franklin, 2013: Atlantic hurricane database uncertainty and presentation of a new database format. Monthly Weather Review 141, 3576–3592. doi:10.1175/MWR-D-12-00254.1',
  LinChavas2012:
    'Lin, N., and D. Chavas, 2012: On hurricane parametric wind and applications in storm surge modeling. Journal of Geophysical Research 117, D09120. doi:10.1029/2011JD017126',
  Miyazaki1961:
    'Miyazaki, M., T. Ueno, and S. Unoki, 1961: Theoretical investigations of typhoon surges along the Japanese coast. Oceanographical Magazine 13, 51–75',
  Moritz2000:
    'Moritz, H., 2000: Geodetic Reference System 1980. Journal of Geodesy 74, 128–133. doi:10.1007/s001900050278',
  NaturalEarth2018:
    'Natural Earth, 2018: version 4.1, land polygons at 1:10 million and 1:50 million, public domain, naturalearthdata.com',
  OgcCog2023: 'Open Geospatial Consortium, 2023: Cloud Optimized GeoTIFF standard, version 1.0. OGC 21-026',
  OgcGeotiff2019: 'Open Geospatial Consortium, 2019: GeoTIFF standard, version 1.1. OGC 19-008r4',
  OgcKml2008: 'Open Geospatial Consortium, 2008: KML, version 2.2. OGC 07-147r2',
  OgcWkt2019:
    'Open Geospatial Consortium, 2019: Geographic information: well-known text representation of coordinate reference systems, version 2.0.6. OGC 18-010r7',
  PowellEtAl2005:
    'Powell, M., G. Soukup, S. Cocke, S. Gulati, N. Morisseau-Leroy, S. Hamid, N. Dorst, and L. Axe, 2005: State of Florida hurricane loss projection model: atmospheric science component. Journal of Wind Engineering and Industrial Aerodynamics 93, 651–674',
  RFC1950:
    'Deutsch, P., and J.-L. Gailly, 1996: ZLIB compressed data format specification version 3.3. RFC 1950. doi:10.17487/RFC1950',
  RFC4180:
    'Shafranovich, Y., 2005: Common format and MIME type for comma-separated values (CSV) files. RFC 4180. doi:10.17487/RFC4180',
  RFC4648:
    'Josefsson, S., 2006: The Base16, Base32, and Base64 Data Encodings. RFC 4648, Internet Engineering Task Force. doi:10.17487/RFC4648',
  RFC7946:
    'Butler, H., M. Daly, A. Doyle, S. Gillies, S. Hagen, and T. Schaub, 2016: The GeoJSON format. RFC 7946. doi:10.17487/RFC7946',
  Rankine1882: 'Rankine, W. J. M., 1882: A Manual of Applied Physics, 10th ed. Charles Griffin, London',
  RewHartnettCaron2006:
    'Rew, R., E. Hartnett, and J. Caron, 2006: NetCDF-4: software implementing an enhanced data model for the geosciences. 22nd International Conference on Interactive Information Processing Systems, American Meteorological Society',
  SampsonSchrader2000:
    'Sampson, C. R., and A. J. Schrader, 2000: The Automated Tropical Cyclone Forecasting System (version 3.2). Bulletin of the American Meteorological Society 81, 1231–1240',
  Schloemer1954:
    'Schloemer, R. W., 1954: Analysis and synthesis of hurricane wind patterns over Lake Okeechobee, Florida. Hydrometeorological Report 31, U.S. Weather Bureau',
  SchottEtAl2012:
    'Schott, T., C. Landsea, G. Hafele, J. Lorens, A. Taylor, H. Thurm, B. Ward, M. Willis, and W. Zaleski, 2012: The Saffir–Simpson hurricane wind scale. National Weather Service',
  SchwerdtHoWatkins1979:
    'Schwerdt, R. W., F. P. Ho, and R. R. Watkins, 1979: Meteorological criteria for standard project hurricane and probable maximum hurricane windfields, Gulf and East Coasts of the United States. NOAA Technical Report NWS 23',
  SimiuScanlan1996: 'Simiu, E., and R. H. Scanlan, 1996: Wind Effects on Structures, 3rd ed. Wiley',
  SmithVanDerWalt2015:
    'Smith, N., and S. van der Walt, 2015: A better default colormap for Matplotlib. 14th Python in Science Conference (SciPy 2015), Austin; colour tables released under CC0',
  Snyder1987:
    'Snyder, J. P., 1987: Map Projections – A Working Manual. U.S. Geological Survey Professional Paper 1395. doi:10.3133/pp1395',
  Sobey1977:
    'Sobey, R. J., B. A. Harper, and K. P. Stark, 1977: Numerical simulation of tropical cyclone storm surge. James Cook University, Department of Civil and Systems Engineering, Research Bulletin CS14',
  Stull2000: 'Stull, R. B., 2000: Meteorology for Scientists and Engineers, 2nd ed. Brooks/Cole',
  Takahashi1939:
    'Takahashi, K., 1939: Distribution of pressure and wind in a typhoon. J. Meteor. Soc. Japan 17, 417–421',
  USACE2002: 'U.S. Army Corps of Engineers, 2002: Coastal Engineering Manual, part II, chapter 2. EM 1110-2-1100',
  VanOosteromStrackee1983:
    'Van Oosterom, A., and J. Strackee, 1983: The solid angle of a plane triangle. IEEE Transactions on Biomedical Engineering BME-30, 125–126. doi:10.1109/TBME.1983.325207',
  VickeryEtAl2000:
    'Vickery, P. J., P. F. Skerlj, and L. A. Twisdale, 2000: Simulation of hurricane risk in the U.S. using empirical track model. Journal of Structural Engineering 126, 1222–1237',
  VickeryWadhera2008:
    'Vickery, P. J., and D. Wadhera, 2008: Statistical models of Holland pressure profile parameter and radius to maximum winds of hurricanes from flight-level pressure and H*Wind data. Journal of Applied Meteorology and Climatology 47, 2497–2517',
  WCAG22: 'World Wide Web Consortium, 2023: Web Content Accessibility Guidelines (WCAG) 2.2. W3C Recommendation',
  WGS84:
    'National Imagery and Mapping Agency, 2000: Department of Defense World Geodetic System 1984, its definition and relationships with local geodetic systems, 3rd ed. TR8350.2',
  WMO2018: 'World Meteorological Organization, 2018: Guide to instruments and methods of observation. WMO-No. 8',
  Wieringa1976:
    'Wieringa, J., 1976: An objective exposure correction method for average wind speeds measured at a sheltered location. Quarterly Journal of the Royal Meteorological Society 102, 241–253',
  Wieringa1992:
    'Wieringa, J., 1992: Updating the Davenport roughness classification. Journal of Wind Engineering and Industrial Aerodynamics 41, 357–368',
  Willoughby2006:
    'Willoughby, H. E., R. W. R. Darling, and M. E. Rahn, 2006: Parametric representation of the primary hurricane vortex. Part II: A new family of sectionally continuous profiles. Monthly Weather Review 134, 1102–1120. doi:10.1175/MWR3106.1',
  WilloughbyRahn2004:
    'Willoughby, H. E., and M. E. Rahn, 2004: Parametric representation of the primary hurricane vortex. Part I: Observations and evaluation of the Holland (1980) model. Monthly Weather Review 132, 3033–3048',
  ZhangUhlhorn2012:
    'Zhang, J. A., and E. W. Uhlhorn, 2012: Hurricane sea surface inflow angle and an observation-based parametric model. Mon. Wea. Rev. 140, 3587–3605',
};
