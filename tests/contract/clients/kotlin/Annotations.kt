// The annotations of the generated interfaces; see Libraries.kt.
package retrofit2.http

annotation class POST(val value: String = "")
annotation class GET(val value: String = "")
@Target(AnnotationTarget.VALUE_PARAMETER) annotation class Body
@Target(AnnotationTarget.VALUE_PARAMETER) annotation class Header(val value: String)
@Target(AnnotationTarget.VALUE_PARAMETER) annotation class Query(val value: String)
@Target(AnnotationTarget.VALUE_PARAMETER) annotation class Path(val value: String)
@Target(AnnotationTarget.FUNCTION) annotation class Headers(vararg val value: String)
@Target(AnnotationTarget.FUNCTION) annotation class Streaming
