// Stand-in for the two HTTP libraries that the generated Kotlin client is written for (Retrofit and OkHttp), which no
// package source of this check carries. It has their names as far as the generated code uses them, and really sends:
// `connect` reads the generated interface's annotations and speaks HTTP with the JDK's own client.
@file:Suppress("unused")

package retrofit2

import java.lang.reflect.InvocationHandler
import java.lang.reflect.Method
import java.lang.reflect.ParameterizedType
import java.lang.reflect.Proxy
import java.lang.reflect.Type
import java.lang.reflect.WildcardType
import java.net.URI
import java.net.http.HttpClient
import java.net.http.HttpRequest
import java.net.http.HttpResponse
import kotlinx.serialization.ExperimentalSerializationApi
import kotlinx.serialization.json.Json
import kotlinx.serialization.serializer
import okhttp3.ResponseBody
import retrofit2.http.Body
import retrofit2.http.GET
import retrofit2.http.Header
import retrofit2.http.POST

class Response<T>(private val status: Int, private val answer: T?, private val refusal: String?) {
    fun code(): Int = status
    fun body(): T? = answer
    fun errorBody(): ResponseBody? = refusal?.let { ResponseBody(it) }
    val isSuccessful: Boolean get() = status in 200..299
}

class Sent(var body: String = "")

inline fun <reified T> connect(url: String, json: Json, sent: Sent = Sent()): T =
    T::class.java.cast(Proxy.newProxyInstance(T::class.java.classLoader, arrayOf(T::class.java), Caller(url, json, sent)))

@OptIn(ExperimentalSerializationApi::class)
class Caller(private val url: String, private val json: Json, private val sent: Sent) : InvocationHandler {
    private val http = HttpClient.newBuilder().version(HttpClient.Version.HTTP_1_1).build()

    override fun invoke(proxy: Any, method: Method, arguments: Array<out Any?>?): Any {
        val post = method.getAnnotation(POST::class.java)
        val path = post?.value ?: method.getAnnotation(GET::class.java).value
        val request = HttpRequest.newBuilder(URI.create("$url/$path"))
        request.header("Accept", "application/json, application/problem+json")
        if (post == null) request.GET()
        method.parameterAnnotations.forEachIndexed { position, annotations ->
            val argument = arguments?.get(position)
            for (annotation in annotations) {
                if (annotation is Header && argument != null) request.header(annotation.value, argument.toString())
                if (annotation is Body && argument != null) {
                    val type = method.genericParameterTypes[position]
                    sent.body = json.encodeToString(json.serializersModule.serializer(type), argument)
                    request.header("Content-Type", "application/json")
                    request.POST(HttpRequest.BodyPublishers.ofString(sent.body))
                }
            }
        }
        val reply = http.send(request.build(), HttpResponse.BodyHandlers.ofString())
        if (reply.statusCode() !in 200..299) return Response<Any>(reply.statusCode(), null, reply.body())
        val serializer = json.serializersModule.serializer(answerOf(method))
        return Response(reply.statusCode(), json.decodeFromString(serializer, reply.body()), null)
    }

    // A suspending function takes a Continuation<Response<Answer>> last; the answer's type stands in there.
    private fun answerOf(method: Method): Type {
        val continuation = method.genericParameterTypes.last() as ParameterizedType
        val argument = continuation.actualTypeArguments[0]
        val response = if (argument is WildcardType) argument.lowerBounds[0] else argument
        return (response as ParameterizedType).actualTypeArguments[0]
    }
}
