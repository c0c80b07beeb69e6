// A first call with the client that OpenAPI Generator makes with swift.yaml.
import LoopslackClient

func pipe(_ role: PipeRole) -> PipeRun {
    let tube = Tube.typeStandardTube(StandardTube(kind: .STANDARD, standard: "en-1057", size: "18x1"))
    let segment = PipeSegment(length: Length(value: 14, unit: .METRE), tube: tube)
    return PipeRun(role: role, segments: [segment], steamAccess: .OPEN)
}

@main
struct FirstCall {
    static func main() async throws {
        LoopslackClientAPIConfiguration.shared.basePath = "http://127.0.0.1:8000"
        let protection = ProtectTo(kind: .PROTECT_TO, temperature: Temperature(value: -20, unit: .DEGREE_CELSIUS))
        let glycol = PropyleneGlycol(kind: .PROPYLENE_GLYCOL, concentration: .typeProtectTo(protection))
        let collectors = CollectorGroup(
            count: 3, area: Area(value: 2.1, unit: .SQUARE_METRE), areaBasis: .APERTURE, type: .FLAT_PLATE,
            emptyingClass: .GOOD)
        let question = LoopDesignQuestion(
            site: Site(coldestOutdoorTemperature: Temperature(value: -12, unit: .DEGREE_CELSIUS)),
            collectors: [collectors],
            pipeRuns: [pipe(.FLOW), pipe(.RETURN)],
            fluid: .typePropyleneGlycol(glycol),
            staticHeight: Length(value: 8, unit: .METRE),
            reliefValve: ReliefValve(setPressure: Pressure(value: 6, unit: .BAR_GAUGE)))
        let answer = try await DesignAPI.designLoop(loopDesignQuestion: question)
        let vessel = answer.result.chosenVessel
        print("\(answer.result.verdict.rawValue): \(vessel.map { "\($0.nominalVolume.value) L" } ?? "no vessel")")
    }
}
