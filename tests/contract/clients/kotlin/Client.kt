// What a Kotlin caller does: a design, a batch and a refused question, through the generated interfaces and classes, with
// the client's own JSON settings, which send every unset optional member as null.
import java.io.File
import kotlinx.coroutines.runBlocking
import loopslack.client.apis.DesignApi
import loopslack.client.infrastructure.Serializer
import loopslack.client.models.*
import retrofit2.Sent
import retrofit2.connect

fun main(arguments: Array<String>) = runBlocking {
    val (where, examples) = arguments
    val json = Serializer.kotlinxSerializationJson
    fun text(place: String) = File("$examples/$place.question.json").readText()
    val sent = Sent()
    val api = connect<DesignApi>(where, json, sent)

    // A design.
    val asked = json.decodeFromString<LoopDesignQuestion>(text("designLoop/wash-house"))
    val answer = api.designLoop(asked, xRequestId = "kotlin-client")
    check(answer.code() == 200) { answer.errorBody()?.string() ?: "" }
    val nulls = Regex(":null").findAll(sent.body).count()
    check(nulls > 20) { "unset members were not sent as null: ${sent.body}" }
    val result = answer.body()!!.result
    check(result.verdict == Verdict.HOLDS)
    val vessel = result.chosenVessel!!
    check(vessel.nominalVolume.unit == VolumeUnit.LITRE)

    // Kinds are sealed: the compiler knows that these are all.
    val named = when (val fluid = asked.fluid) {
        is Fluid.WaterWrapper -> "water"
        is Fluid.PropyleneGlycolWrapper -> fluid.value.kind.value
        is Fluid.EthyleneGlycolWrapper -> fluid.value.kind.value
        is Fluid.OwnWrapper -> fluid.value.name
    }
    check(named == "propylene-glycol")

    // A batch: every design has its own outcome, in the order asked.
    val batch = api.designLoops(json.decodeFromString<LoopDesignBatchQuestion>(text("designLoops/three-roofs"))).body()!!
    check(batch.designs.map { it.id to it.verdict?.value } == listOf("quote-1" to "holds", "quote-2" to "holds", "quote-3" to null))
    check(batch.designs[2].problem?.errors.orEmpty()[0].pointer == "/staticHeight")
    check(batch.summary.designs == 3)

    // A refused question: all faults at once.
    val wrong = asked.copy(
        staticHeight = Length(1e6, LengthUnit.METRE),
        collectors = listOf(asked.collectors[0].copy(count = 0)),
    )
    val refused = api.designLoop(wrong)
    check(refused.code() == 422)
    val problem = json.decodeFromString<Problem>(refused.errorBody()!!.string())
    val pointers = problem.errors.orEmpty().map { it.pointer }
    check("/collectors/0/count" in pointers) { pointers }
    println("kotlin: designed ${vessel.id} with $nulls members sent as null, a batch, refused ${pointers.size} faults")
}
