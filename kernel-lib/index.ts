import './notebook/install';

// catalogue
export type { ColumnTable } from 'arquero';
export { Catalogue, type CatalogueParts } from './catalogue/catalogue';
export type { ColumnData, ColumnInfo, ColumnKind, ColumnValues } from './catalogue/columns';
export { type CrossMatchOptions, crossMatch } from './catalogue/cross-match';
export { type AstrometricNoiseOptions, astrometricNoise } from './catalogue/cuts/astrometric-noise';
export { type ConeOptions, cone } from './catalogue/cuts/cone';
export type { Cut } from './catalogue/cuts/cut';
export { hasBands } from './catalogue/cuts/has-bands';
export { insidePolygon, type PolygonOptions } from './catalogue/cuts/inside-polygon';
export { magnitudeRange } from './catalogue/cuts/magnitude-range';
export { parallaxSignal } from './catalogue/cuts/parallax-signal';
export { type CatalogueRow, where } from './catalogue/cuts/where';
export { type EpochOptions, propagateEpoch } from './catalogue/epoch';
export { withGalactic } from './catalogue/galactic-columns';
export type { HistoryStep } from './catalogue/history';
export type { MissingValues } from './catalogue/read/declared-missing';
export type { BadCells } from './catalogue/read/raw-table';
export { type CatalogueFormat, type ReadCatalogueOptions, readCatalogue } from './catalogue/read/read-catalogue';
export {
  type NamedColumn,
  type OpenRole,
  type RecognisedRoles,
  recogniseRoles,
} from './catalogue/read/recognise-roles';
export type { BaseRole, Role, Roles } from './catalogue/roles';
export { type WriteCatalogueOptions, writeCatalogue } from './catalogue/write/write-catalogue';
// diagrams
export { type AgeTurnoffDiagramOptions, ageTurnoffDiagram, type TurnoffCurve } from './diagrams/age-turnoff-diagram';
export {
  type ColourMagnitudeCurve,
  type ColourMagnitudeDiagramOptions,
  colourMagnitudeDiagram,
  type IsochroneCurve,
} from './diagrams/colour-magnitude-diagram';
export { type CornerDiagramOptions, cornerDiagram } from './diagrams/corner-diagram';
export { Figure, type FigureLayout, type FigureTrace } from './diagrams/figure';
export { type HrCurve, type HrDiagramOptions, hrDiagram } from './diagrams/hr-diagram';
export {
  type MassLuminosityCurve,
  type MassLuminosityDiagramOptions,
  type MassLuminosityStars,
  massLuminosityDiagram,
} from './diagrams/mass-luminosity-diagram';
export { type ParallaxHistogramOptions, parallaxHistogram } from './diagrams/parallax-histogram';
export { type ProperMotionDiagramOptions, properMotionDiagram } from './diagrams/proper-motion-diagram';
export { type ResidualDiagramOptions, type Residuals, residualDiagram } from './diagrams/residual-diagram';
export { type SkyMapOptions, skyMap } from './diagrams/sky-map';
export { type StaticFigureOptions, staticFigure } from './diagrams/static-svg';
// distance
export { type ClusterDistance, type ClusterDistanceOptions, clusterDistance } from './distance/cluster-distance';
export { type StarDistancesOptions, starDistances } from './distance/star-distances';
export { type BandExtinctionOptions, bandExtinction, colourExcessRatio } from './extinction/band-coefficients';
// extinction
export { type ConvertReddeningOptions, convertReddening, type ReddeningMeasure } from './extinction/convert-reddening';
export { type DereddenOptions, deredden } from './extinction/deredden';
export { gaiaExtinctionRatio, intrinsicGaiaColour } from './extinction/gaia-extinction';
export { extinctionLaw, type LawName } from './extinction/laws';

// membership
export { type FindMembersOptions, findMembers } from './membership/find-members';
export {
  type ClusterSummary as MemberCluster,
  type FieldComponent,
  Membership,
  type SelectionQuality,
  type SpaceMotion,
} from './membership/membership';
// models
export { analyticModel, analyticModelWith } from './models/analytic-model';
export { type EvolvedStar, type EvolvedStars, type EvolveOptions, evolve } from './models/evolve';
export { type ExportIsochronesOptions, exportIsochrones } from './models/grid/export-isochrones';
export { type IsochroneGrid, type IsochroneGridOptions, isochroneGrid } from './models/grid/isochrone-grid';
export { type InitialFinalOptions, initialFinalMass, progenitorMass } from './models/initial-final-mass';
export { type InitialMassFunction, initialMassFunction } from './models/initial-mass-function';
export { type AnalyticIsochroneOptions, isochrone } from './models/isochrone';
export { type IsochroneTurnoff, isochroneTurnoff, type TurnoffTable, turnoffTable } from './models/isochrone-turnoff';
export { mainSequenceLifetime, turnoffMass } from './models/lifetime';
export { type Composition, SOLAR_Z } from './models/metallicity';
export type { Isochrone, IsochroneOptions, StellarModel } from './models/stellar-model';
export { type Track, type TrackOptions, track } from './models/track';
export {
  type CoolingOptions,
  type CoolingWhiteDwarf,
  type WhiteDwarfAge,
  whiteDwarfAge,
  whiteDwarfCooling,
  whiteDwarfRadius,
} from './models/white-dwarf';
export { type ZeroAgeStar, type ZeroAgeStars, zeroAge } from './models/zero-age';
export { show } from './notebook/display';
// notebook
export { breathe, interruptible } from './notebook/interruptible';
export { type OnProgress, type Progress, type ProgressOptions, progress } from './notebook/progress';
export { type AbsoluteMagnitudesOptions, absoluteMagnitudes } from './photometry/absolute-magnitudes';
// photometry
export { BANDS, type BandDescription } from './photometry/bands';
export { type BolometricCorrectionOptions, bolometricCorrection } from './photometry/bolometric-correction';
export {
  type ColourTemperatureOptions,
  colourFromTemperature,
  temperatureFromColour,
} from './photometry/colour-temperature';
export { combineMagnitudes } from './photometry/combine-magnitudes';
export { hipparcosMinusV } from './photometry/hipparcos-magnitude';
export { type PhotometricScales, photometricScales, type ScaleEntry } from './photometry/photometric-scales';
export { SOLAR_COLOURS, SOLAR_MAGNITUDES, type SolarValue } from './photometry/solar-photometry';
export {
  type LuminosityClass,
  SPECTRAL_CLASSES,
  type SpectralClassBounds,
  spectralClass,
} from './photometry/spectral-class';
// quantity
export type { Band, ColourName } from './quantity/band';
export {
  type Measured,
  measured,
  measuredFromSamples,
  measuredFromSigma,
} from './quantity/measured';
export { convertUnits } from './quantity/units';
// relations
export { type AgeClusterOptions, type AgedCluster, ageCluster } from './relations/age-cluster';
export {
  angularDiameter,
  SURFACE_BRIGHTNESS,
  type SurfaceBrightnessName,
  type SurfaceBrightnessRelation,
} from './relations/angular-diameter';
export {
  type EvolutionaryState,
  type EvolutionaryStateOptions,
  evolutionaryState,
} from './relations/evolutionary-state';
export {
  type InferRadiiOptions,
  inferRadii,
  type MeasuredColumn,
  type RadiusAgreement,
  type RadiusInference,
  type RadiusWay,
} from './relations/infer-radii';
export { lifetimeFromMass } from './relations/lifetime';
export type { RelationMethod } from './relations/line-methods';
export { type MainSequenceRadii, mainSequenceRadii } from './relations/main-sequence-stars';
export {
  fitMassLuminosity,
  type MassLuminosityFit,
  type MassLuminosityFitCurve,
  type MassLuminosityOptions,
  type RelationLifetime,
} from './relations/mass-luminosity';
export { fitMassRadius, type MassRadiusFit, type MassRadiusOptions } from './relations/mass-radius';
export type {
  ExcludedStar,
  MassRelationFit,
  MassRelationOptions,
  OtherSelection,
  SelectionComparison,
} from './relations/mass-relation';
export {
  type ClumpCheck,
  type Oddities,
  type OdditiesOptions,
  type Oddity,
  type OddityKind,
  oddities,
} from './relations/oddities';
export type { BreakScore } from './relations/power-law-fit';
export {
  MASS_LUMINOSITY_RELATIONS,
  type MassLuminosityName,
  type MassRadiusName,
  type PublishedRelation,
  publishedLuminosity,
  publishedRadius,
} from './relations/published-relations';
export type { LeverageStar, Outlier, RelationResiduals } from './relations/relation-result';
export type { RelationColumns, RelationQuantity, StarsOfKnownMass } from './relations/relation-stars';
export { type WhiteDwarfCheck, type WhiteDwarfCheckOptions, whiteDwarfCheck } from './relations/white-dwarf-check';
// report
export { type ClusterSummary, type ClusterSummaryParts, clusterSummary } from './report/cluster-summary';
export { type ExportReportOptions, exportReport, type WrittenReport } from './report/export-report';
export { type ReportHtmlOptions, reportHtml } from './report/report-html';
// simulate
export { type SimulateClusterOptions, simulateCluster } from './simulate/simulate-cluster';
// stars
export {
  type EvolutionaryGroup,
  type EvolutionaryGroupOptions,
  evolutionaryGroup,
  evolutionaryGroups,
} from './stars/evolutionary-group';
export { type PhysicalPropertiesOptions, physicalProperties } from './stars/physical-properties';
export { wienPeak } from './stars/wien-peak';
// turnoff
export type { ClusterOptions } from './turnoff/cluster-setting';
export type { DiagramChoice } from './turnoff/diagram-stars';
export {
  type EstimateReddeningOptions,
  estimateReddening,
  type MainSequenceFit,
  type MainSequenceFitOptions,
  mainSequenceFit,
} from './turnoff/main-sequence-fit';
export { type RidgeLine, type RidgeLineOptions, ridgeLine } from './turnoff/ridge-line';
export { type TurnoffAge, type TurnoffAgeOptions, turnoffAge } from './turnoff/turnoff-age';
export { type TurnoffPoint, type TurnoffPointOptions, turnoffPoint } from './turnoff/turnoff-point';
