// The body types of the generated interfaces; see Libraries.kt.
package okhttp3

class RequestBody
class ResponseBody(private val text: String) { fun string(): String = text }
class MultipartBody { class Part }
