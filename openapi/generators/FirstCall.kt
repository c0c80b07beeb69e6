// A first call with the client that OpenAPI Generator makes with kotlin.yaml. With Retrofit in your build, `api` comes
// from the generated ApiClient: ApiClient(baseUrl = where).createService(DesignApi::class.java)
import kotlinx.coroutines.runBlocking
import loopslack.client.apis.DesignApi
import loopslack.client.infrastructure.Serializer
import loopslack.client.models.*
import retrofit2.connect

fun pipe(role: PipeRole) = PipeRun(
    role = role,
    segments = listOf(
        PipeSegment(
            length = Length(14.0, LengthUnit.METRE),
            tube = Tube.StandardWrapper(StandardTube(StandardTube.Kind.STANDARD, "en-1057", "18x1")),
        ),
    ),
    steamAccess = SteamAccess.OPEN,
)

fun main(arguments: Array<String>) = runBlocking {
    val where = arguments.firstOrNull() ?: "http://127.0.0.1:8000"
    val api = connect<DesignApi>(where, Serializer.kotlinxSerializationJson)
    val protection = ProtectTo(ProtectTo.Kind.PROTECT_TO, Temperature(-20.0, TemperatureUnit.DEGREE_CELSIUS))
    val question = LoopDesignQuestion(
        site = Site(coldestOutdoorTemperature = Temperature(-12.0, TemperatureUnit.DEGREE_CELSIUS)),
        collectors = listOf(
            CollectorGroup(
                count = 3,
                area = Area(2.1, AreaUnit.SQUARE_METRE),
                areaBasis = AreaBasis.APERTURE,
                type = CollectorType.FLAT_PLATE,
                emptyingClass = EmptyingClass.GOOD,
            ),
        ),
        pipeRuns = listOf(pipe(PipeRole.FLOW), pipe(PipeRole.RETURN)),
        fluid = Fluid.PropyleneGlycolWrapper(
            PropyleneGlycol(PropyleneGlycol.Kind.PROPYLENE_GLYCOL, Concentration.ProtectToWrapper(protection)),
        ),
        staticHeight = Length(8.0, LengthUnit.METRE),
        reliefValve = ReliefValve(setPressure = Pressure(6.0, PressureUnit.BAR_GAUGE)),
    )
    val answer = api.designLoop(question).body() ?: error("refused")
    val vessel = answer.result.chosenVessel
    println("${answer.result.verdict.value}: ${vessel?.nominalVolume?.run { "$value ${unit.value}" } ?: "no vessel"}")
}
