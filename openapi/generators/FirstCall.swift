// A first call with the client that OpenAPI Generator makes with swift.yaml.
import LoopslackClient

func pipe(_ role: PipeRole) -> PipeRun {
    let tube = Tube.typeStandardTube(StandardTube(kind: .standard, standard: "en-1057", size: "18x1"))
    let segment = PipeSegment(length: Length(value: 14, unit: .metre), tube: tube)
    return PipeRun(role: role, segments: [segment], steamAccess: .open)
}

@main
struct FirstCall {
    static func main() async throws {
        LoopslackClientAPIConfiguration.shared.basePath = "http://127.0.0.1:8000"
        let protection = ProtectTo(kind: .protectTo, temperature: Temperature(value: -20, unit: .degreeCelsius))
        let glycol = PropyleneGlycol(kind: .propyleneGlycol, concentration: .typeProtectTo(protection))
        let collectors = CollectorGroup(
            count: 3, area: Area(value: 2.1, unit: .squareMetre), areaBasis: .aperture, type: .flatPlate,
            emptyingClass: .good)
        let question = LoopDesignQuestion(
            site: Site(coldestOutdoorTemperature: Temperature(value: -12, unit: .degreeCelsius)),
            collectors: [collectors],
            pipeRuns: [pipe(.flow), pipe(._return)],
            fluid: .typePropyleneGlycol(glycol),
            staticHeight: Length(value: 8, unit: .metre),
            reliefValve: ReliefValve(setPressure: Pressure(value: 6, unit: .barGauge)))
        let answer = try await DesignAPI.designLoop(loopDesignQuestion: question)
        let vessel = answer.result.chosenVessel
        print("\(answer.result.verdict.rawValue): \(vessel.map { "\($0.nominalVolume.value) L" } ?? "no vessel")")
    }
}
