import { database, inTransaction } from '@/db/connection'
import { Backup } from '@/models/backup'
import { Bath } from '@/models/bath'
import { BathStir } from '@/models/bath-stir'
import { Calibration } from '@/models/calibration'
import { Closure } from '@/models/closure'
import { Coat } from '@/models/coat'
import { Delivery } from '@/models/delivery'
import { DoseHour } from '@/models/dose-hour'
import { Evidence } from '@/models/evidence'
import { FanHours } from '@/models/fan-hours'
import { FanSwitch } from '@/models/fan-switch'
import { Foundry } from '@/models/foundry'
import { FormerAir } from '@/models/former-air'
import { FoundryEvent } from '@/models/foundry-event'
import { Hold } from '@/models/hold'
import { JobRun } from '@/models/job-run'
import { LookOver } from '@/models/look-over'
import { Member } from '@/models/member'
import { MqttBroker } from '@/models/mqtt-broker'
import { MqttHour } from '@/models/mqtt-hour'
import { MqttMessage } from '@/models/mqtt-message'
import { MqttTopic } from '@/models/mqtt-topic'
import { Notice } from '@/models/notice'
import { Operation } from '@/models/operation'
import { Piece } from '@/models/piece'
import { Place } from '@/models/place'
import { PushSubscription } from '@/models/push-subscription'
import { Reading } from '@/models/reading'
import { Recipe } from '@/models/recipe'
import { RecipeCoat } from '@/models/recipe-coat'
import { RecipeVersion } from '@/models/recipe-version'
import { Release } from '@/models/release'
import { Section } from '@/models/section'
import { Sensor } from '@/models/sensor'
import { SensorDevice } from '@/models/sensor-device'
import { SensorOffset } from '@/models/sensor-offset'
import { SensorToken } from '@/models/sensor-token'
import { Session } from '@/models/session'
import { SetAsideReading } from '@/models/set-aside-reading'
import { ShiftHours } from '@/models/shift-hours'
import { SignInWait } from '@/models/sign-in-wait'
import { Tree } from '@/models/tree'
import { TreeEvent } from '@/models/tree-event'
import { TreePiece } from '@/models/tree-piece'
import { TreePlace } from '@/models/tree-place'
import { TreeWatch } from '@/models/tree-watch'
import { Upload } from '@/models/upload'
import { Work } from '@/models/work'

// Each names itself: a production build shortens class names, and of two models with one name the later replaces the earlier.
// Defining a model again replaces it in the shared instance, so a reload under `next dev` is harmless.
const models = [
  Foundry,
  ShiftHours,
  Closure,
  Member,
  Session,
  SignInWait,
  Sensor,
  SensorToken,
  SensorDevice,
  SensorOffset,
  Reading,
  SetAsideReading,
  DoseHour,
  Place,
  FanHours,
  FanSwitch,
  FormerAir,
  Bath,
  BathStir,
  Recipe,
  RecipeVersion,
  RecipeCoat,
  Work,
  Section,
  Piece,
  Tree,
  TreePiece,
  TreePlace,
  Operation,
  Coat,
  Evidence,
  Calibration,
  Hold,
  LookOver,
  Release,
  TreeEvent,
  TreeWatch,
  Notice,
  PushSubscription,
  Delivery,
  JobRun,
  FoundryEvent,
  Backup,
  MqttBroker,
  MqttTopic,
  MqttMessage,
  MqttHour,
  Upload,
]
for (const model of models) model.initialize(database)

Session.belongsTo(Member, { as: 'member', foreignKey: 'memberId' })
Sensor.hasMany(SensorToken, { as: 'tokens', foreignKey: 'sensorId' })
SensorToken.belongsTo(Sensor, { as: 'sensor', foreignKey: 'sensorId' })
Place.belongsTo(Sensor, { as: 'sensor', foreignKey: 'sensorId' })
Sensor.hasMany(Place, { as: 'places', foreignKey: 'sensorId' })
Place.hasMany(FanHours, { as: 'fanHours', foreignKey: 'placeId' })
Bath.hasMany(BathStir, { as: 'stirs', foreignKey: 'bathId' })
BathStir.belongsTo(Bath, { as: 'bath', foreignKey: 'bathId' })
BathStir.belongsTo(Member, { as: 'member', foreignKey: 'memberId' })
Recipe.hasMany(RecipeVersion, { as: 'versions', foreignKey: 'recipeId' })
RecipeVersion.belongsTo(Recipe, { as: 'recipe', foreignKey: 'recipeId' })
RecipeVersion.hasMany(RecipeCoat, { as: 'coats', foreignKey: 'recipeVersionId' })
RecipeCoat.belongsTo(RecipeVersion, { as: 'recipeVersion', foreignKey: 'recipeVersionId' })
RecipeCoat.belongsTo(Bath, { as: 'bath', foreignKey: 'bathId' })
Work.hasMany(Section, { as: 'sections', foreignKey: 'workId' })
Section.belongsTo(Work, { as: 'work', foreignKey: 'workId' })
Section.hasMany(Piece, { as: 'pieces', foreignKey: 'sectionId' })
Piece.belongsTo(Section, { as: 'section', foreignKey: 'sectionId' })
Piece.hasOne(TreePiece, { as: 'treePiece', foreignKey: 'pieceId' })
TreePiece.belongsTo(Piece, { as: 'piece', foreignKey: 'pieceId' })
TreePiece.belongsTo(Tree, { as: 'tree', foreignKey: 'treeId' })
Tree.belongsTo(RecipeVersion, { as: 'recipeVersion', foreignKey: 'recipeVersionId' })
Tree.hasMany(TreePiece, { as: 'treePieces', foreignKey: 'treeId' })
Tree.hasMany(TreePlace, { as: 'treePlaces', foreignKey: 'treeId' })
Tree.hasMany(Coat, { as: 'coats', foreignKey: 'treeId' })
Tree.hasMany(Hold, { as: 'holds', foreignKey: 'treeId' })
Tree.hasMany(LookOver, { as: 'lookOvers', foreignKey: 'treeId' })
Tree.hasMany(Release, { as: 'releases', foreignKey: 'treeId' })
Tree.hasMany(TreeWatch, { as: 'watches', foreignKey: 'treeId' })
Tree.hasMany(TreeEvent, { as: 'events', foreignKey: 'treeId' })
TreePlace.belongsTo(Tree, { as: 'tree', foreignKey: 'treeId' })
TreePlace.belongsTo(Place, { as: 'place', foreignKey: 'placeId' })
Coat.belongsTo(Tree, { as: 'tree', foreignKey: 'treeId' })
Coat.belongsTo(Bath, { as: 'bath', foreignKey: 'bathId' })
Coat.belongsTo(Place, { as: 'place', foreignKey: 'placeId' })
Coat.belongsTo(Member, { as: 'author', foreignKey: 'loggedBy' })
Coat.belongsTo(Operation, { as: 'operation', foreignKey: 'operationId' })
Operation.hasMany(Coat, { as: 'coats', foreignKey: 'operationId' })
Coat.hasMany(Evidence, { as: 'evidence', foreignKey: 'coatId' })
Evidence.belongsTo(Coat, { as: 'coat', foreignKey: 'coatId' })
Evidence.belongsTo(Tree, { as: 'tree', foreignKey: 'treeId' })
Evidence.belongsTo(Member, { as: 'member', foreignKey: 'memberId' })
Hold.belongsTo(Tree, { as: 'tree', foreignKey: 'treeId' })
Hold.belongsTo(Member, { as: 'holder', foreignKey: 'heldBy' })
Hold.belongsTo(Member, { as: 'lifter', foreignKey: 'liftedBy' })
LookOver.belongsTo(Tree, { as: 'tree', foreignKey: 'treeId' })
LookOver.belongsTo(Coat, { as: 'coat', foreignKey: 'coatId' })
LookOver.belongsTo(Member, { as: 'member', foreignKey: 'memberId' })
Release.belongsTo(Tree, { as: 'tree', foreignKey: 'treeId' })
Release.belongsTo(Member, { as: 'releaser', foreignKey: 'releasedBy' })
TreeEvent.belongsTo(Tree, { as: 'tree', foreignKey: 'treeId' })
TreeEvent.belongsTo(Member, { as: 'member', foreignKey: 'memberId' })
FoundryEvent.belongsTo(Member, { as: 'member', foreignKey: 'memberId' })
TreeWatch.belongsTo(Tree, { as: 'tree', foreignKey: 'treeId' })
TreeWatch.belongsTo(Member, { as: 'member', foreignKey: 'memberId' })
Notice.belongsTo(Tree, { as: 'tree', foreignKey: 'treeId' })
Notice.hasMany(Delivery, { as: 'deliveries', foreignKey: 'noticeId' })
Delivery.belongsTo(Notice, { as: 'notice', foreignKey: 'noticeId' })
PushSubscription.belongsTo(Member, { as: 'member', foreignKey: 'memberId' })
MqttTopic.belongsTo(Sensor, { as: 'sensor', foreignKey: 'sensorId' })
Upload.belongsTo(Sensor, { as: 'sensor', foreignKey: 'sensorId' })
Upload.belongsTo(Member, { as: 'author', foreignKey: 'createdBy' })
Member.hasMany(PushSubscription, { as: 'pushSubscriptions', foreignKey: 'memberId' })

export {
  database,
  inTransaction,
  Foundry,
  ShiftHours,
  Closure,
  Member,
  Session,
  SignInWait,
  Sensor,
  SensorToken,
  SensorDevice,
  SensorOffset,
  Reading,
  SetAsideReading,
  DoseHour,
  Place,
  FanHours,
  FanSwitch,
  FormerAir,
  Bath,
  BathStir,
  Recipe,
  RecipeVersion,
  RecipeCoat,
  Work,
  Section,
  Piece,
  Tree,
  TreePiece,
  TreePlace,
  Operation,
  Coat,
  Evidence,
  Calibration,
  Hold,
  LookOver,
  Release,
  TreeEvent,
  TreeWatch,
  Notice,
  PushSubscription,
  Delivery,
  JobRun,
  FoundryEvent,
  Backup,
  MqttBroker,
  MqttTopic,
  MqttMessage,
  MqttHour,
  Upload,
}
